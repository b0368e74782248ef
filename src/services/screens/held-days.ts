import { indexCatalogue } from "@/core/scores/catalogue-index";
import { bytesOfDay, dayByJunction, type DayByJunction } from "@/core/scores/day-by-junction";
import { bytesOfTotals } from "@/core/scores/day-totals";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay } from "@/core/scores/screen-day-codec";
import type { ScreenDay } from "@/core/scores/types";
import { poolOf } from "@/db/bulk-transaction";
import type { Db } from "@/db/client";
import { readBlobs } from "@/db/read-blobs";
import type { CityCatalogue } from "../catalogue/catalogue";
import { processMemory } from "../process-memory";

/** The slices of one local day, by their keys in order. */
export interface SlicesOfDay {
  day: number;
  ids: readonly number[];
  bytes: number;
}

/**
 * What a process holds of the slices between questions, at most: 20 million traversals of 1,000 junctions take some
 * 300 MiB. Days beyond it that were asked for longest ago are read again when somebody asks for them.
 */
export const MOST_HELD_BYTES = 512 * 2 ** 20;

interface HeldDay {
  ids: string;
  day: DayByJunction;
  bytes: number;
  /** Of the catalogue that the day was read with. */
  version: number;
}

interface Held {
  /** By local day, the one that was asked for longest ago first. */
  days: Map<number, HeldDay>;
  /** Settles when the reading that is under way is over: two questions never read the same days side by side. */
  reading: Promise<unknown>;
}

const heldBy = processMemory<object, Held>("held days");

/**
 * The days, merged from their slices and ready to be scored, in their order, from memory as far as they are held, the others from the database; null
 * where some have been replaced meanwhile. A day of which slices came, went or changed is read anew, no other. All
 * days together must not exceed `most` bytes.
 */
export async function holdDays(db: Db, wanted: readonly SlicesOfDay[], catalogue: CityCatalogue, most = MOST_HELD_BYTES): Promise<DayByJunction[] | null> {
  const held = heldBy.get(db) ?? { days: new Map<number, HeldDay>(), reading: Promise.resolve() };
  heldBy.set(db, held);
  if (missingOf(held, wanted, catalogue).length === 0) return collect(held, wanted);
  const reading = held.reading.then(async () => {
    const missing = missingOf(held, wanted, catalogue);
    makeRoom(held, wanted, missing, most);
    await readDays(db, held, missing, catalogue);
    return collect(held, wanted);
  });
  // What failed is told to who asked for it.
  held.reading = reading.catch(() => undefined);
  return reading;
}

function keyOf(ids: readonly number[]): string {
  return ids.join(",");
}

/** Also those that had movements which the catalogue of then did not list, and the present one may. */
function missingOf(held: Held, wanted: readonly SlicesOfDay[], { version }: CityCatalogue): SlicesOfDay[] {
  return wanted.filter(({ day, ids }) => {
    const known = held.days.get(day);
    return known?.ids !== keyOf(ids) || (known.day.hasUnlisted && known.version !== version);
  });
}

/** Marks the days as asked for just now. */
function collect(held: Held, wanted: readonly SlicesOfDay[]): DayByJunction[] | null {
  const days: DayByJunction[] = [];
  for (const { day, ids } of wanted) {
    const known = held.days.get(day);
    if (known?.ids !== keyOf(ids)) return null;
    held.days.delete(day);
    held.days.set(day, known);
    days.push(known.day);
  }
  return days;
}

/** Forgets what is to be read anew, then the days that were asked for longest ago. */
function makeRoom(held: Held, wanted: readonly SlicesOfDay[], missing: readonly SlicesOfDay[], most: number): void {
  for (const { day } of missing) held.days.delete(day);
  let bytes = 0;
  for (const day of [...missing, ...held.days.values()]) bytes += day.bytes;
  const kept = new Set(wanted.map(({ day }) => day));
  for (const [day, known] of held.days) {
    if (bytes <= most) return;
    if (kept.has(day)) continue;
    held.days.delete(day);
    bytes -= known.bytes;
  }
}

async function readDays(db: Db, held: Held, missing: readonly SlicesOfDay[], catalogue: CityCatalogue): Promise<void> {
  if (missing.length === 0) return;
  const dayOf = new Map(missing.flatMap((slices) => slices.ids.map((id) => [id, slices] as const)));
  const waiting = new Map<number, ScreenDay[]>();
  const query = `select id, payload from screen_days where id in (${[...dayOf.keys()].join(",")}) order by day`;
  for await (const { key, bytes } of readBlobs(poolOf(db), query)) {
    const { day, ids } = dayOf.get(key) as SlicesOfDay;
    // Who waits for others of its day needs bytes of its own.
    const slices = [...(waiting.get(day) ?? []), decodeScreenDay(ids.length > 1 ? bytes.slice() : bytes)];
    waiting.set(day, slices);
    if (slices.length < ids.length) continue;
    waiting.delete(day);
    const ready = dayByJunction(mergeScreenDays(slices), indexCatalogue(catalogue.keys));
    held.days.set(day, { ids: keyOf(ids), day: ready, bytes: bytesOfDay(ready) + bytesOfTotals(ready.index), version: catalogue.version });
  }
}
