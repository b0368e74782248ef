import { eq } from "drizzle-orm";
import { z } from "zod";
import type { ProfileQuarter } from "@/core/scores/score-profile";
import { corridors, junctions } from "@/db/schema";
import { notFound } from "@/domain/errors";
import { WhenQuery, type JunctionView, type ProfilePoint } from "@/domain/junction";
import { estimateView } from "@/domain/estimate";
import { RowKey } from "@/domain/row-key";
import { requirePermission, type Context } from "../context";
import { detailsOf } from "../screens/details-of";
import { finite, rowOf } from "../screens/ranked-row";
import { basisOf, scoreCity } from "../screens/score-city";
import { exitView, legView, movementView } from "./leg-view";
import { readExits, readLegs, readMovements } from "./junction-rows";

export const GetJunction = z.object({ junctionId: RowKey, when: WhenQuery });

export async function getJunction(ctx: Context, input: z.input<typeof GetJunction>): Promise<JunctionView> {
  requirePermission(ctx, "junction.view");
  const parsed = GetJunction.safeParse(input);
  if (!parsed.success) throw notFound("Junction", String(input.junctionId));
  const { junctionId, when } = parsed.data;
  const [row] = await ctx.db
    .select({
      id: junctions.id,
      code: junctions.code,
      name: junctions.name,
      lat: junctions.lat,
      lon: junctions.lon,
      corridor: corridors.name,
      district: junctions.district,
      cycleS: junctions.cycleS,
      lastRetimed: junctions.lastRetimed,
      notes: junctions.notes,
    })
    .from(junctions)
    .leftJoin(corridors, eq(corridors.id, junctions.corridorId))
    .where(eq(junctions.id, junctionId));
  if (!row) throw notFound("Junction", junctionId);

  const legRows = await readLegs(ctx.db, { junctionId });
  const legIds = legRows.map((leg) => leg.id);
  const [exitRows, movementRows, scored] = await Promise.all([
    readExits(ctx.db, junctionId),
    readMovements(ctx.db, legIds),
    scoreCity(ctx, { ...when, turn: "any" }),
  ]);
  const details = await detailsOf(ctx, { ...when, turn: "any" }, scored, movementRows, legIds);
  const listed = scored.catalogue.junctions.get(junctionId);
  return {
    ...row,
    score: listed ? rowOf(listed, scored) : null,
    legs: legRows.map((leg) => legView(leg, scored.scores.leg(leg.id), details.legs.get(leg.id))),
    exits: exitRows.map(exitView),
    movements: movementRows.map((movement) => movementView(movement, scored.scores.movement(movement.id), details.movements.get(movement.id))),
    profile: details.profile.map(profilePoint),
    basis: basisOf(scored),
  };
}

export function profilePoint(quarter: ProfileQuarter): ProfilePoint {
  return {
    fromMin: quarter.quarter * 15,
    vehicles: quarter.vehicles,
    // One vehicle says nothing about a mean.
    delay: quarter.vehicles > 1 ? estimateView(quarter.delay) : null,
    reachM: finite(quarter.reachP95M),
    spill: finite(quarter.spill.value),
  };
}
