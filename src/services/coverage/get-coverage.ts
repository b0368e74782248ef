import { sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { screenDays } from "@/db/schema";
import { isoFromDay } from "@/domain/local-time";
import type { CoverageView } from "@/domain/upload";
import { cityCatalogue, type CityCatalogue } from "../catalogue/catalogue";
import { requirePermission, type Context } from "../context";
import { loadScreenDays } from "../screens/screen-data";

const MOST_UNCOVERED = 500;

/** Every movement of every day is looked at for it, and the page asks again and again: once for each state of the data. */
const remembered = new WeakMap<object, { version: number; view: Promise<CoverageView> }>();

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
  const { days } = await loadScreenDays(db, { days: "every" });

  const everSeen = new Set<number>();
  const seenOn = new Map<number, number>();
  for (const day of days) {
    const seen = new Set<number>();
    for (const key of day.movement) {
      const leg = catalogue.movements.get(key)?.legId;
      const junction = leg === undefined ? undefined : catalogue.legs.get(leg)?.junctionId;
      if (junction !== undefined) seen.add(junction);
    }
    seenOn.set(day.day, seen.size);
    for (const id of seen) everSeen.add(id);
  }
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
