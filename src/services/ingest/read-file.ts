import type { FileMapping, RejectedRow, RejectReason } from "@/domain/upload";
import { isGzip } from "@/formats/gzip";
import { PING_READ_DEFAULTS } from "@/formats/pings/read-pings";
import type { RowCounts } from "@/formats/row-tally";
import { unusable } from "@/formats/unusable";
import type { Context } from "../context";
import { pieceSizes } from "./pieces/piece-sizes";
import { decodeRecord } from "./pieces/records";
import type { Run, Tell } from "./pieces/run";
import type { Span } from "./steps/cut-time";
import { rangesOf } from "./steps/file-ranges";
import type { Place } from "./steps/near-cells";
import type { SlottedPings } from "./steps/ping-slots";
import { readRows, type RowsRead, type RowsToRead } from "./steps/read-rows";

export interface PingUpload {
  id: string;
  storageKey: string;
  mapping: FileMapping;
  /** Null where nobody is named, and for a feed, which looks after its own seams. */
  supplierId: number | null;
}

/** By how much files of pings shrink at most when they are packed. */
const PACKED = 8;
const MOST_SAMPLES = 20;

/** Whether a file is so large that other workers should help. */
export async function isLarge(ctx: Context, { storageKey }: PingUpload): Promise<boolean> {
  const bytes = (await ctx.storage.size(storageKey)) ?? 0;
  if (bytes < 2) return false;
  const start: Uint8Array[] = [];
  for await (const chunk of await ctx.storage.open(storageKey, { from: 0, to: 2 })) start.push(chunk as Uint8Array);
  return bytes * (isGzip(Buffer.concat(start)) ? PACKED : 1) >= pieceSizes(ctx).sharedBytes;
}

export interface FileRead {
  counts: RowCounts;
  pings: SlottedPings[];
  /** Of the first and the last ping in time. */
  span: Span;
}

export interface ReadSteps {
  /** Only pings around these; all where absent. */
  near?: readonly Place[];
  onReject?: (row: RejectedRow) => Promise<void>;
  tell: Tell;
}

/** Reads a stored file of pings into slots of whole vehicles, in ranges where its bytes allow it. */
export async function readFile(ctx: Context, run: Run, { storageKey, mapping }: PingUpload, steps: ReadSteps): Promise<FileRead> {
  const bytes = (await ctx.storage.size(storageKey)) ?? 0;
  const sizes = pieceSizes(ctx);
  const whole: RowsToRead = { storageKey, mapping, bytes, part: null, mostPings: sizes.pings, near: steps.near ?? null };
  const cut = run.isShared && mapping.format === "csv" ? await rangesOf(ctx.storage, storageKey, bytes, sizes.rangeBytes(bytes)) : null;
  const inputs = cut ? cut.ranges.map((range) => ({ ...whole, part: { range, head: cut.head } })) : [whole];
  const read = await run.perform(readRows, inputs, steps.tell);
  const parts = read.includes(null) ? await run.perform(readRows, [whole], steps.tell) : read;
  return join(run, parts as RowsRead[], steps);
}

function spanOf(pings: readonly SlottedPings[]): Span {
  return {
    firstMs: pings.reduce((least, object) => Math.min(least, object.firstMs), Infinity),
    lastMs: pings.reduce((most, object) => Math.max(most, object.lastMs), -Infinity),
  };
}

async function join(run: Run, parts: readonly RowsRead[], { onReject }: ReadSteps): Promise<FileRead> {
  const counts: RowCounts = { rowsRead: 0, accepted: 0, rejected: {}, samples: [] };
  let line = 0;
  for (const part of parts) {
    const inFile = (row: RejectedRow): RejectedRow => ({ ...row, line: row.line + line });
    counts.rowsRead += part.counts.rowsRead;
    counts.accepted += part.counts.accepted;
    for (const [reason, rows] of Object.entries(part.counts.rejected) as [RejectReason, number][]) counts.rejected[reason] = (counts.rejected[reason] ?? 0) + rows;
    counts.samples.push(...part.counts.samples.slice(0, MOST_SAMPLES - counts.samples.length).map(inFile));
    if (onReject) {
      for (const object of part.rejects) for (const row of decodeRecord<RejectedRow[]>(await run.store.read(object))) await onReject(inFile(row));
    }
    line += part.lines;
  }
  const { maxRows } = PING_READ_DEFAULTS;
  if (counts.rowsRead > maxRows) throw unusable(`The file has more than ${maxRows} rows. Send it in parts.`);
  const pings = parts.flatMap((part) => part.pings);
  return { counts, pings, span: spanOf(pings) };
}
