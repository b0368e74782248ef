import { and, asc, eq, isNull, ne, sql } from "drizzle-orm";
import { CLEANING } from "@/core/options";
import { uploads } from "@/db/schema";
import type { Storage } from "@/storage/storage";
import type { Context } from "../context";
import type { Run, Tell } from "./pieces/run";
import { cutTime, type Span } from "./steps/cut-time";
import type { SlottedPings } from "./steps/ping-slots";

/** Kept of both ends of a file, so that trips over the seam to the next one are whole: longer than any wait at a signal. */
const EDGE_MS = 30 * 60_000;
/** Files lie side by side where no trip would end in the gap between them. */
const SEAM_MS = CLEANING.maxGapS * 1000;
const MOST_NEIGHBOURS = 16;

/** A file's ends: `first` is its first half hour, `last` its last one. */
type End = "first" | "last";

export interface Edged {
  id: string;
  /** Null where nobody is named: then no file is known to go on with the same vehicles. */
  supplierId: number | null;
}

const folderOf = (uploadId: string) => `edges/${uploadId}`;

/** Keeps the first and the last half hour of a file beside it, hashes in the place of names, for the files that adjoin it. */
export async function keepEdges(ctx: Context, run: Run, upload: Edged, pings: readonly SlottedPings[], { firstMs, lastMs }: Span, tell: Tell): Promise<void> {
  if (upload.supplierId === null) return;
  const spans: Record<End, Span> = {
    first: { firstMs, lastMs: firstMs + EDGE_MS },
    last: { firstMs: lastMs - EDGE_MS, lastMs },
  };
  const ends: End[] = ["first", "last"];
  const touched = pings.filter((object) => ends.some((end) => object.firstMs <= spans[end].lastMs && object.lastMs >= spans[end].firstMs));
  const cut = await run.perform(cutTime, touched.map((object) => ({ pings: object, spans: ends.map((end) => spans[end]) })), tell);
  await dropEdges(ctx, upload.id);
  for (const [e, end] of ends.entries()) {
    const parts = cut.flatMap((of) => of[e] ?? []);
    for (const [i, part] of parts.entries()) await ctx.storage.put(`${folderOf(upload.id)}/${end}-${i}`, run.store.stream(part.name));
    await putList(ctx.storage, `${folderOf(upload.id)}/${end}`, parts);
  }
}

/** Lets go of what was kept of a file. */
export function dropEdges(ctx: Context, uploadId: string): Promise<void> {
  return ctx.storage.removeFolder(folderOf(uploadId));
}

export interface AlongPings {
  pings: SlottedPings[];
  /** A sentence for each file that was read along with. */
  remarks: string[];
  /** What lies outside is the other files' own; absent where nothing is read along with. */
  span?: Span;
}

/**
 * The ends of the same supplier's files that adjoin this one in time, in the run's store. What both files see of them
 * counts once, as with any files that overlap. To be called while no other file comes in.
 */
export async function pingsAlong(ctx: Context, run: Run, upload: Edged, span: Span, name: string): Promise<AlongPings> {
  const along: AlongPings = { pings: [], remarks: [] };
  for (const neighbour of await neighboursOf(ctx, upload, span)) {
    const folder = folderOf(neighbour.id);
    if ((await ctx.storage.size(`${folder}/${neighbour.end}`)) === null) continue;
    for (const [i, part] of (await readList(ctx.storage, `${folder}/${neighbour.end}`)).entries()) {
      const object = `${name}-${neighbour.id}-${i}`;
      await run.store.put(object, (await ctx.storage.open(`${folder}/${neighbour.end}-${i}`)) as AsyncIterable<Uint8Array>);
      along.pings.push({ ...part, name: object });
    }
    along.span = { firstMs: span.firstMs - SEAM_MS, lastMs: span.lastMs + SEAM_MS };
    along.remarks.push(`Read together with the ${neighbour.end} half hour of ${neighbour.fileName}, so that trips over the seam are whole.`);
  }
  return along;
}

async function neighboursOf(ctx: Context, { id, supplierId }: Edged, { firstMs, lastMs }: Span): Promise<{ id: string; fileName: string; end: End }[]> {
  if (supplierId === null) return [];
  const begins = sql`(${uploads.report} ->> 'firstAt')::timestamptz`;
  const ends = sql`(${uploads.report} ->> 'lastAt')::timestamptz`;
  const at = (ms: number) => sql`${new Date(ms).toISOString()}::timestamptz`;
  const goesBefore = sql`${begins} < ${at(firstMs)} and ${ends} between ${at(firstMs - SEAM_MS)} and ${at(lastMs)}`;
  const goesAfter = sql`${ends} > ${at(lastMs)} and ${begins} between ${at(firstMs)} and ${at(lastMs + SEAM_MS)}`;
  const rows = await ctx.db
    .select({ id: uploads.id, fileName: uploads.fileName, isBefore: sql<boolean>`${goesBefore}` })
    .from(uploads)
    .where(
      and(
        ne(uploads.id, id),
        eq(uploads.supplierId, supplierId),
        eq(uploads.kind, "pings"),
        eq(uploads.state, "done"),
        isNull(uploads.feedHour),
        sql`(${goesBefore} or ${goesAfter})`,
      ),
    )
    .orderBy(asc(uploads.createdAt), asc(uploads.receivedNo))
    .limit(MOST_NEIGHBOURS);
  return rows.map(({ isBefore, ...row }) => ({ ...row, end: isBefore ? "last" : "first" }));
}

/** Lists of kept objects are text: they outlive the program that wrote them. */
async function putList(storage: Storage, key: string, parts: readonly SlottedPings[]): Promise<void> {
  const list = parts.map(({ offsets, pings, firstMs, lastMs }) => ({ offsets: [...offsets], pings: [...pings], firstMs, lastMs }));
  const bytes = Buffer.from(JSON.stringify(list));
  async function* once(): AsyncGenerator<Uint8Array> {
    yield bytes;
  }
  await storage.put(key, once());
}

async function readList(storage: Storage, key: string): Promise<Omit<SlottedPings, "name">[]> {
  const chunks: Uint8Array[] = [];
  for await (const chunk of await storage.open(key)) chunks.push(chunk as Uint8Array);
  const list = JSON.parse(Buffer.concat(chunks).toString()) as { offsets: number[]; pings: number[]; firstMs: number; lastMs: number }[];
  return list.map((part) => ({ ...part, offsets: Float64Array.from(part.offsets), pings: Uint32Array.from(part.pings) }));
}
