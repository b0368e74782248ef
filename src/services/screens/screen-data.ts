import { sql } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import type { DayByJunction } from "@/core/scores/day-by-junction";
import type { Db } from "@/db/client";
import { screenDays } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { dayFromIso, weekdayOf } from "@/domain/local-time";
import type { DayType } from "@/domain/screen-choices";
import type { CityCatalogue } from "../catalogue/catalogue";
import { holdDays, MOST_HELD_BYTES, type SlicesOfDay } from "./held-days";

interface Slice {
  id: number;
  uploadId: string;
  day: number;
  methodVersion: number;
  medianIntervalS: number | null;
  bytes: number;
}

export interface ScreenDays {
  days: DayByJunction[];
  firstDay: number | null;
  lastDay: number | null;
  medianIntervalS: number | null;
  /** Files on the chosen dates that another method has read: they wait for being read again, and count nowhere. */
  waitingFiles: number;
  /** Earlier chosen days that are left out, since the process cannot hold them along with the others. */
  daysLeftOut: number;
}

export interface DateChoice {
  days: DayType;
  since?: string;
  until?: string;
}

const MOST_RUNS = 5;

export function isChosenDay(day: number, choice: DateChoice): boolean {
  if (choice.since && day < dayFromIso(choice.since)) return false;
  if (choice.until && day > dayFromIso(choice.until)) return false;
  const weekday = weekdayOf(day);
  if (choice.days === "weekdays") return weekday >= 1 && weekday <= 5;
  if (choice.days === "saturday") return weekday === 6;
  if (choice.days === "sunday") return weekday === 0;
  return true;
}

/**
 * What the present method has measured on the chosen dates: figures of two methods are never added up nor ranked
 * beside each other. An upload or a leg that is matched anew replaces slices between the list and the reading; then
 * the list is read afresh.
 */
export async function loadScreenDays(db: Db, choice: DateChoice, catalogue: CityCatalogue, mostBytes = MOST_HELD_BYTES): Promise<ScreenDays> {
  for (let run = 1; run <= MOST_RUNS; run++) {
    const chosen = (await listSlices(db)).filter((slice) => isChosenDay(slice.day, choice));
    const present = chosen.filter((slice) => slice.methodVersion === METHOD_VERSION);
    const all = byDay(present);
    const fitting = newestThatFit(all, mostBytes);
    const days = await holdDays(db, fitting, catalogue, mostBytes);
    if (days === null) continue;
    const intervals = present.flatMap((slice) => (slice.medianIntervalS === null ? [] : [slice.medianIntervalS])).sort((a, b) => a - b);
    return {
      days,
      firstDay: days.at(0)?.day ?? null,
      lastDay: days.at(-1)?.day ?? null,
      medianIntervalS: intervals.length > 0 ? intervals[Math.floor(intervals.length / 2)] : null,
      waitingFiles: new Set(chosen.filter((slice) => slice.methodVersion !== METHOD_VERSION).map((slice) => slice.uploadId)).size,
      daysLeftOut: all.length - fitting.length,
    };
  }
  throw new AppError("conflict", "The figures are being renewed at this moment. Try again.");
}

export async function listSlices(db: Db): Promise<Slice[]> {
  return db
    .select({
      id: screenDays.id,
      uploadId: screenDays.uploadId,
      day: screenDays.day,
      methodVersion: screenDays.methodVersion,
      medianIntervalS: screenDays.medianIntervalS,
      bytes: sql<number>`length(${screenDays.payload})`.mapWith(Number),
    })
    .from(screenDays)
    .orderBy(screenDays.day, screenDays.id);
}

function byDay(slices: readonly Slice[]): SlicesOfDay[] {
  const days = new Map<number, { day: number; ids: number[]; bytes: number }>();
  for (const { day, id, bytes } of slices) {
    const known = days.get(day);
    if (known) {
      known.ids.push(id);
      known.bytes += bytes;
    } else days.set(day, { day, ids: [id], bytes });
  }
  return [...days.values()];
}

/** A question never takes more memory than may be held: the newest days count, and the answer says which. */
function newestThatFit(days: readonly SlicesOfDay[], mostBytes: number): SlicesOfDay[] {
  let first = days.length;
  for (let bytes = 0; first > 0; first--) {
    bytes += days[first - 1].bytes;
    if (bytes > mostBytes) break;
  }
  return days.slice(first);
}
