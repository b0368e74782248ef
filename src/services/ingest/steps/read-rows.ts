import type { PingColumns } from "@/core/types";
import { AppError } from "@/domain/errors";
import type { FileMapping, RejectedRow } from "@/domain/upload";
import { appendColumns, emptyColumns } from "@/formats/pings/ping-columns";
import { readPings } from "@/formats/pings/read-pings";
import type { RowCounts } from "@/formats/row-tally";
import { VehicleNames } from "@/formats/vehicle-names";
import type { ByteRange } from "@/storage/storage";
import type { Bench, PieceKind } from "../pieces/piece-kind";
import { encodeRecord } from "../pieces/records";
import { createHasher, vehicleKey } from "../vehicle-hash";
import { rowsOfRange } from "./file-ranges";
import { nearOnly, type Place } from "./near-cells";
import { writeSlots, type SlottedPings } from "./ping-slots";

const REJECTS_PER_OBJECT = 20_000;

export interface RowsToRead {
  storageKey: string;
  mapping: FileMapping;
  bytes: number;
  /** Null: the whole file, as a stream. */
  part: { range: ByteRange; head: Uint8Array } | null;
  /** Pings of an object. */
  mostPings: number;
  /** Only pings around these; all where null. */
  near: readonly Place[] | null;
}

export interface RowsRead {
  counts: RowCounts;
  lines: number;
  pings: SlottedPings[];
  /** Objects with the rejected rows, their lines counted from the beginning of the piece. */
  rejects: string[];
}

/** Null: the file must be read as a whole. */
export const readRows: PieceKind<RowsToRead, RowsRead | null> = {
  name: "read rows",
  async work(bench, input) {
    try {
      return await read(bench, input);
    } catch (error) {
      // Read as a whole it is refused by the right line.
      if (input.part && error instanceof AppError) return null;
      throw error;
    }
  },
};

async function read(bench: Bench, input: RowsToRead): Promise<RowsRead | null> {
  const { part, mapping } = input;
  const isLater = part !== null && part.range.from > 0;
  const names = new VehicleNames();
  const pings = collectPings(bench, input, names, await vehicleKey(bench.db));
  const rejects = collectRejects(bench, isLater ? 1 : 0);
  let lines = 0;
  let readBytes = 0;
  let hasQuotes = false;
  async function* counted(): AsyncGenerator<Uint8Array> {
    const source = part ? rowsOfRange(bench.storage, { ...input, ...part }, () => (hasQuotes = true)) : await bench.storage.open(input.storageKey);
    for await (const chunk of source as AsyncIterable<Uint8Array>) {
      readBytes += chunk.length;
      yield chunk;
    }
  }
  const ofBytes = part ? part.range.to - part.range.from : input.bytes;
  const counts = await readPings(
    counted(),
    // The file's first row stands before every later range, as its header.
    isLater ? { ...mapping, hasHeader: true } : mapping,
    {
      async onBatch(batch) {
        await pings.add(batch);
        await bench.tell(Math.min(1, readBytes / ofBytes));
      },
      onReject: (row) => rejects.add(row),
      onEnd: (n) => (lines = n),
    },
    names,
  );
  // A quoted field may go on over line ends. Where one goes over the end of the range, a row of it makes no sense.
  if (part && hasQuotes && counts.rejected.columns !== undefined) return null;
  const samples = isLater ? counts.samples.map((row) => ({ ...row, line: row.line - 1 })) : counts.samples;
  return { counts: { ...counts, samples }, lines: isLater ? lines - 1 : lines, pings: await pings.finish(), rejects: await rejects.finish() };
}

function collectPings({ store, name }: Bench, { mostPings, near }: RowsToRead, names: VehicleNames, key: Buffer) {
  const choose = near === null ? (batch: PingColumns) => batch : nearOnly(near);
  const hashes = createHasher(key, names);
  const objects: SlottedPings[] = [];
  let held = emptyColumns(0);
  const flush = async () => {
    objects.push(await writeSlots(store, `${name}.pings-${objects.length}`, held, hashes()));
    held.length = 0;
  };
  return {
    async add(batch: PingColumns) {
      held = appendColumns(held, choose(batch));
      if (held.length >= mostPings) await flush();
    },
    async finish() {
      if (held.length > 0) await flush();
      return objects;
    },
  };
}

function collectRejects({ store, name }: Bench, lineShift: number) {
  const objects: string[] = [];
  let held: RejectedRow[] = [];
  const flush = async () => {
    const object = `${name}.rejects-${objects.length}`;
    await store.put(object, [encodeRecord(held)]);
    objects.push(object);
    held = [];
  };
  return {
    async add(row: RejectedRow) {
      held.push({ ...row, line: row.line - lineShift });
      if (held.length >= REJECTS_PER_OBJECT) await flush();
    },
    async finish() {
      if (held.length > 0) await flush();
      return objects;
    },
  };
}
