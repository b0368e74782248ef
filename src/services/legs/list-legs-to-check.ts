import { asc, desc, eq, sql } from "drizzle-orm";
import { junctions, legs } from "@/db/schema";
import type { LegToCheck } from "@/domain/leg-check";
import { requirePermission, type Context } from "../context";

/** Twice what a city of 1,500 junctions has. */
const MOST_LEGS = 12_000;

/** Doubtful legs first, those that more traffic uses before the others. */
export async function listLegsToCheck(ctx: Context): Promise<LegToCheck[]> {
  requirePermission(ctx, "leg.view");
  const doubtful = sql<number>`jsonb_array_length(${legs.doubts})`;
  const rows = await ctx.db
    .select({
      id: legs.id,
      name: legs.name,
      bearingDeg: legs.bearingDeg,
      junctionId: junctions.id,
      code: junctions.code,
      junctionName: junctions.name,
      doubts: legs.doubts,
      support: legs.support,
      storageM: legs.storageM,
      origin: legs.origin,
      locked: legs.locked,
    })
    .from(legs)
    .innerJoin(junctions, eq(junctions.id, legs.junctionId))
    .orderBy(desc(doubtful), desc(legs.support), asc(junctions.name), asc(legs.id))
    .limit(MOST_LEGS);
  return rows.map(({ junctionId, code, junctionName, ...leg }) => ({ ...leg, junction: { id: junctionId, code, name: junctionName } }));
}
