import type { PingColumns } from "@/core/types";
import type { FileMapping, RejectedRow } from "@/domain/upload";
import { readPings } from "@/formats/pings/read-pings";
import type { RowCounts } from "@/formats/row-tally";
import type { VehicleNames } from "@/formats/vehicle-names";
import type { Context } from "../context";
import type { PingStore } from "./ping-store";

export interface PingUpload {
  id: string;
  storageKey: string;
  mapping: FileMapping;
}

export interface ReadSteps {
  /** Rows to keep; all where absent. */
  choose?: (batch: PingColumns) => PingColumns;
  onReject?: (row: RejectedRow) => Promise<void>;
  /** Share of the file's bytes that is read. */
  onProgress?: (share: number) => Promise<void>;
}

/** Reads a stored file of pings into a store, a batch at a time. */
export async function readIntoStore(ctx: Context, upload: PingUpload, store: PingStore, names: VehicleNames, steps: ReadSteps): Promise<RowCounts> {
  const bytes = (await ctx.storage.size(upload.storageKey)) ?? 0;
  const stream = await ctx.storage.open(upload.storageKey);
  let readBytes = 0;
  async function* counted(): AsyncGenerator<Uint8Array> {
    for await (const chunk of stream) {
      readBytes += (chunk as Uint8Array).length;
      yield chunk as Uint8Array;
    }
  }
  const sink = {
    async onBatch(batch: PingColumns) {
      await store.add(steps.choose ? steps.choose(batch) : batch);
      await steps.onProgress?.(readBytes / bytes);
    },
    onReject: steps.onReject,
  };
  return readPings(counted(), upload.mapping, sink, names);
}
