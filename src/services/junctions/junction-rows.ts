import { aliasedTable, eq, inArray } from "drizzle-orm";
import type { Db } from "@/db/client";
import { exits, junctions, legs, movements } from "@/db/schema";

const upstreamExit = aliasedTable(exits, "upstream_exit");
const upstreamJunction = aliasedTable(junctions, "upstream_junction");

export type LegRow = Awaited<ReturnType<typeof readLegs>>[number];
export type MovementRow = Awaited<ReturnType<typeof readMovements>>[number];

export async function readLegs(db: Db, by: { junctionId: number } | { legId: number }) {
  return db
    .select({
      id: legs.id,
      junctionId: legs.junctionId,
      name: legs.name,
      bearingDeg: legs.bearingDeg,
      line: legs.line,
      storageM: legs.storageM,
      freeSpeedMs: legs.freeSpeedMs,
      speedLimitMs: legs.speedLimitMs,
      lanes: legs.lanes,
      locked: legs.locked,
      support: legs.support,
      origin: legs.origin,
      stopLineOrigin: legs.stopLineOrigin,
      doubts: legs.doubts,
      upstreamJunctionId: upstreamJunction.id,
      upstreamName: upstreamJunction.name,
    })
    .from(legs)
    .leftJoin(upstreamExit, eq(upstreamExit.id, legs.upstreamExitId))
    .leftJoin(upstreamJunction, eq(upstreamJunction.id, upstreamExit.junctionId))
    .where("legId" in by ? eq(legs.id, by.legId) : eq(legs.junctionId, by.junctionId))
    .orderBy(legs.bearingDeg, legs.id);
}

export async function readExits(db: Db, junctionId: number) {
  return db
    .select({ id: exits.id, bearingDeg: exits.bearingDeg, line: exits.line })
    .from(exits)
    .where(eq(exits.junctionId, junctionId))
    .orderBy(exits.bearingDeg, exits.id);
}

export async function readMovements(db: Db, legIds: number[]) {
  if (legIds.length === 0) return [];
  return db
    .select({
      id: movements.id,
      legId: movements.legId,
      exitId: movements.exitId,
      turn: movements.turn,
      turnDeg: movements.turnDeg,
      referenceS: movements.referenceS,
      referenceSource: movements.referenceSource,
      referenceN: movements.referenceN,
      cordonUpM: movements.cordonUpM,
      cordonDownM: movements.cordonDownM,
    })
    .from(movements)
    .where(inArray(movements.legId, legIds))
    .orderBy(movements.legId, movements.turnDeg, movements.id);
}
