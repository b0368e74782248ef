import { eq } from "drizzle-orm";
import { lengthOf } from "@/core/geometry/polyline";
import { junctions } from "@/db/schema";
import { notFound } from "@/domain/errors";
import type { LegCheckView, LegOfCheck } from "@/domain/leg-check";
import { reprocessLegs } from "@/jobs/definitions/reprocess-legs";
import { RowKey } from "@/domain/row-key";
import { requirePermission, type Context } from "../context";
import { readExits, readLegs, readMovements, type LegRow } from "../junctions/junction-rows";
import { exitView, pairsOf } from "../junctions/leg-view";

/** One junction's legs as an engineer checks them, and whether its pings are being matched anew. */
export async function getLegCheck(ctx: Context, input: { junctionId: string | number }): Promise<LegCheckView> {
  requirePermission(ctx, "leg.view");
  const id = RowKey.safeParse(input.junctionId);
  const columns = { id: junctions.id, code: junctions.code, name: junctions.name };
  const [junction] = id.success ? await ctx.db.select(columns).from(junctions).where(eq(junctions.id, id.data)) : [];
  if (!junction) throw notFound("Junction", input.junctionId);
  // Asked for before the legs: what is read as settled then has its legs as settled, too.
  const rematch = await ctx.queue.stateOf(reprocessLegs, { junctionIds: [junction.id] });
  const legRows = await readLegs(ctx.db, { junctionId: junction.id });
  const [exitRows, movementRows] = await Promise.all([
    readExits(ctx.db, junction.id),
    readMovements(ctx.db, legRows.map((leg) => leg.id)),
  ]);
  return {
    junction,
    legs: legRows.map(legOfCheck),
    exits: exitRows.map(exitView),
    movements: movementRows.map(({ id, legId, exitId, turn, turnDeg }) => ({ id, legId, exitId, turn, turnDeg })),
    rematch,
  };
}

function legOfCheck(row: LegRow): LegOfCheck {
  const { id, name, bearingDeg, line, storageM, freeSpeedMs, speedLimitMs, lanes, origin, stopLineOrigin, locked, support, doubts } = row;
  const upstream = row.upstreamJunctionId === null ? null : { junctionId: row.upstreamJunctionId, name: row.upstreamName ?? "" };
  return { id, name, bearingDeg, line: pairsOf(line), lengthM: lengthOf(line), storageM, freeSpeedMs, speedLimitMs, lanes, upstream, origin, stopLineOrigin, locked, support, doubts };
}
