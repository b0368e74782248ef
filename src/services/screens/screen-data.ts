import { inArray } from "drizzle-orm";
import { mergeScreenDays } from "@/core/scores/merge-screen-days";
import { decodeScreenDay } from "@/core/scores/screen-day-codec";
import type { ScreenDay } from "@/core/scores/types";
import type { Db } from "@/db/client";
import { screenDays } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { dayFromIso, weekdayOf } from "@/domain/local-time";
import type { DayType } from "@/domain/screen";

interface Slice {
  id: number;
  day: number;
  medianIntervalS: number | null;
  traversals: number;
}

export interface ScreenDays {
  days: ScreenDay[];
  firstDay: number | null;
  lastDay: number | null;
  medianIntervalS: number | null;
}

export interface DateChoice {
  days: DayType;
  since?: string;
  until?: string;
}

const MOST_RUNS = 5;

/** Decoded slices stay in memory: a city's months are a few hundred megabytes, and every filter reads them. */
const decoded = new WeakMap<object, Map<number, ScreenDay>>();

export async function listSlices(db: Db): Promise<Slice[]> {
  return db
    .select({
      id: screenDays.id,
      day: screenDays.day,
      medianIntervalS: screenDays.medianIntervalS,
      traversals: screenDays.traversals,
    })
    .from(screenDays)
    .orderBy(screenDays.day, screenDays.id);
}

export function isChosenDay(day: number, choice: DateChoice): boolean {
  if (choice.since && day < dayFromIso(choice.since)) return false;
  if (choice.until && day > dayFromIso(choice.until)) return false;
  const weekday = weekdayOf(day);
  if (choice.days === "weekdays") return weekday >= 1 && weekday <= 5;
  if (choice.days === "saturday") return weekday === 6;
  if (choice.days === "sunday") return weekday === 0;
  return true;
}

export async function loadScreenDays(db: Db, choice: DateChoice): Promise<ScreenDays> {
  const { chosen, bySlice } = await readSlices(db, choice);
  const byDay = new Map<number, ScreenDay[]>();
  for (const slice of chosen) {
    const list = byDay.get(slice.day) ?? [];
    list.push(bySlice.get(slice.id) as ScreenDay);
    byDay.set(slice.day, list);
  }
  const days = [...byDay.values()].map((slices) => mergeScreenDays(ofNewestMethod(slices)));
  const intervals = chosen.flatMap((slice) => (slice.medianIntervalS === null ? [] : [slice.medianIntervalS])).sort((a, b) => a - b);
  return {
    days,
    firstDay: days.length > 0 ? days[0].day : null,
    lastDay: days.length > 0 ? days[days.length - 1].day : null,
    medianIntervalS: intervals.length > 0 ? intervals[Math.floor(intervals.length / 2)] : null,
  };
}

/** What different methods measured on one day cannot be added up: until the older file is matched anew, the newer counts. */
function ofNewestMethod(slices: readonly ScreenDay[]): ScreenDay[] {
  const newest = slices.reduce((most, slice) => Math.max(most, slice.methodVersion), 0);
  return slices.filter((slice) => slice.methodVersion === newest);
}

interface ChosenSlices {
  chosen: Slice[];
  bySlice: ReadonlyMap<number, ScreenDay>;
}

/** An upload or a leg that is matched anew replaces slices between the list and the reading: then the list is read afresh. */
async function readSlices(db: Db, choice: DateChoice): Promise<ChosenSlices> {
  for (let run = 1; ; run++) {
    const all = await listSlices(db);
    const chosen = all.filter((slice) => isChosenDay(slice.day, choice));
    forgetOthers(db, all);
    const bySlice = await decodeSlices(db, chosen);
    if (chosen.every((slice) => bySlice.has(slice.id))) return { chosen, bySlice };
    if (run === MOST_RUNS) throw new AppError("conflict", "The figures are being renewed at this moment. Try again.");
  }
}

/** Slices that were replaced have no reader any more. */
function forgetOthers(db: Db, all: readonly Slice[]): void {
  const known = decoded.get(db);
  if (!known || known.size === 0) return;
  const present = new Set(all.map((slice) => slice.id));
  for (const id of known.keys()) if (!present.has(id)) known.delete(id);
}

/** A map of its own for each caller: what another one forgets meanwhile is not missed. */
async function decodeSlices(db: Db, slices: readonly Slice[]): Promise<Map<number, ScreenDay>> {
  let known = decoded.get(db);
  if (!known) decoded.set(db, (known = new Map()));
  const wanted = new Map<number, ScreenDay>();
  const missing: number[] = [];
  for (const { id } of slices) {
    const day = known.get(id);
    if (day) wanted.set(id, day);
    else missing.push(id);
  }
  if (missing.length === 0) return wanted;
  const rows = await db.select({ id: screenDays.id, payload: screenDays.payload }).from(screenDays).where(inArray(screenDays.id, missing));
  for (const row of rows) {
    const day = decodeScreenDay(row.payload);
    known.set(row.id, day);
    wanted.set(row.id, day);
  }
  return wanted;
}
