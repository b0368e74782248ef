import { and, eq, inArray, sql } from "drizzle-orm";
import { z } from "zod";
import { junctions, traversals } from "@/db/schema";
import { notFound } from "@/domain/errors";
import { StripQuery, type LegStripView } from "@/domain/junction";
import { RowKey } from "@/domain/row-key";
import { requirePermission, type Context } from "../context";
import { profilePoint } from "../junctions/get-junction";
import { legView, movementView } from "../junctions/leg-view";
import { readLegs, readMovements } from "../junctions/junction-rows";
import { detailsOf } from "../screens/details-of";
import { basisOf, scoreCity } from "../screens/score-city";
import { chosenDates } from "./chosen-dates";

export const GetLegStrip = z.object({ legId: RowKey, query: StripQuery });

/** All that a strip page says in words and figures; the tracks themselves come from getTracks. */
export async function getLegStrip(ctx: Context, input: z.input<typeof GetLegStrip>): Promise<LegStripView> {
  requirePermission(ctx, "strip.view");
  const parsed = GetLegStrip.safeParse(input);
  if (!parsed.success) throw notFound("Leg", String(input.legId));
  const { legId, query } = parsed.data;
  const [leg] = await readLegs(ctx.db, { legId });
  if (!leg) throw notFound("Leg", legId);
  const [[junction], movementRows, scored, dates] = await Promise.all([
    ctx.db.select({ id: junctions.id, code: junctions.code, name: junctions.name }).from(junctions).where(eq(junctions.id, leg.junctionId)),
    readMovements(ctx.db, [legId]),
    scoreCity(ctx, query),
    chosenDates(ctx.db, { ...query, day: undefined }),
  ]);
  const details = await detailsOf(ctx, query, scored, movementRows, [legId]);
  const counted =
    dates.length === 0
      ? []
      : await ctx.db
          .select({ date: traversals.localDay, tracks: sql<number>`count(*)`.mapWith(Number) })
          .from(traversals)
          .where(and(eq(traversals.legId, legId), inArray(traversals.localDay, dates)))
          .groupBy(traversals.localDay)
          .orderBy(traversals.localDay);
  return {
    junction,
    leg: legView(leg, scored.scores.leg(legId), details.legs.get(legId)),
    movements: movementRows.map((movement) => movementView(movement, scored.scores.movement(movement.id), details.movements.get(movement.id))),
    days: counted,
    profile: details.profile.map(profilePoint),
    basis: basisOf(scored),
  };
}
