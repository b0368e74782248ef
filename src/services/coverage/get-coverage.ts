import { sql } from "drizzle-orm";
import type { DayByJunction } from "@/core/scores/day-by-junction";
import { QUARTERS, startAt } from "@/core/scores/starts";
import type { Db } from "@/db/client";
import { screenDays } from "@/db/schema";
import { isoFromDay } from "@/domain/local-time";
import type { CoverageView } from "@/domain/upload";
import { cityCatalogue, type CityCatalogue } from "../catalogue/catalogue";
import { requirePermission, type Context } from "../context";
import { processMemory } from "../process-memory";
import { loadScreenDays } from "../screens/screen-data";

const MOST_UNCOVERED = 500;

/** Every movement of every day is looked at for it, and the page asks again and again: once for each state of the data. */
const remembered = processMemory<object, { version: number; view: Promise<CoverageView> }>("coverage");

export async function getCoverage(ctx: Context): Promise<CoverageView> {
  requirePermission(ctx, "coverage.view");
  const catalogue = await cityCatalogue(ctx.db);
  const known = remembered.get(ctx.db);
  if (known?.version === catalogue.version) return known.view;
  const view = readCoverage(ctx.db, catalogue);
  remembered.set(ctx.db, { version: catalogue.version, view });
  // What failed is asked for afresh.
  view.catch(() => remembered.delete(ctx.db));
  return view;
}

async function readCoverage(db: Db, catalogue: CityCatalogue): Promise<CoverageView> {
  const slices = await db
    .select({
      day: screenDays.day,
      traversals: sql<number>`sum(${screenDays.traversals})`.mapWith(Number),
      medianIntervalS: sql<number | null>`max(${screenDays.medianIntervalS})`,
    })
    .from(screenDays)
    .groupBy(screenDays.day)
    .orderBy(screenDays.day);
  const { everSeen, seenOn } = await seenJunctions(db, catalogue);
  const uncovered = [...catalogue.junctions.values()].filter((junction) => !everSeen.has(junction.id));
  return {
    junctions: catalogue.junctions.size,
    covered: everSeen.size,
    days: slices.map((slice) => ({
      date: isoFromDay(slice.day),
      traversals: slice.traversals,
      junctions: seenOn.get(slice.day) ?? 0,
      medianIntervalS: slice.medianIntervalS,
    })),
    uncovered: uncovered.slice(0, MOST_UNCOVERED).map(({ id, code, name }) => ({ id, code, name })),
  };
}

/** Junctions seen on any day, and how many on each: from the newest days back, as many at a time as memory holds. */
async function seenJunctions(db: Db, catalogue: CityCatalogue): Promise<{ everSeen: Set<number>; seenOn: Map<number, number> }> {
  const everSeen = new Set<number>();
  const seenOn = new Map<number, number>();
  for (let until: string | undefined; ; ) {
    const { days, firstDay, daysLeftOut } = await loadScreenDays(db, { days: "every", until }, catalogue);
    for (const day of days) {
      const seen = passedJunctions(day);
      seenOn.set(day.day, seen.length);
      for (const id of seen) everSeen.add(id);
    }
    if (daysLeftOut === 0 || firstDay === null) return { everSeen, seenOn };
    until = isoFromDay(firstDay - 1);
  }
}

/** Junctions that somebody passed. */
function passedJunctions({ junction, passedStart }: DayByJunction): number[] {
  return [...junction].filter((_, row) => startAt(passedStart, row, 0) < startAt(passedStart, row, QUARTERS));
}
