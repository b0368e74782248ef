import { asc, inArray, sql, type SQL } from "drizzle-orm";
import type { AnyPgColumn } from "drizzle-orm/pg-core";
import { lengthOf } from "@/core/geometry/polyline";
import { METHOD_VERSION } from "@/core/method-version";
import type { DriveSide, JunctionPoint, Network } from "@/core/types";
import type { Db } from "@/db/client";
import { exits, junctions, legs, movements } from "@/db/schema";

/** Two files at once would both learn the same new legs; they, and changes of legs, take turns. */
export const INGEST_LOCK = 7_401_160;

const ROWS_PER_STATEMENT = 400;

/** Database keys by index into the network's lists. */
export interface NetworkKeys {
  legs: Int32Array;
  exits: Int32Array;
  movements: Int32Array;
}

const nullable = (value: number): number | null => (Number.isFinite(value) ? value : null);
const orNaN = (value: number | null): number => value ?? NaN;

export type KeyedPoint = JunctionPoint & { key: number };

export async function readJunctionPoints(db: Db): Promise<KeyedPoint[]> {
  return db
    .select({ key: junctions.id, id: junctions.code, lat: junctions.lat, lon: junctions.lon })
    .from(junctions)
    .orderBy(asc(junctions.id));
}

/** The network that earlier uploads taught, in the core's shape. `junctions` carry their database keys. */
export async function readNetwork(db: Db, points: KeyedPoint[], driveSide: DriveSide): Promise<Network | undefined> {
  const indexOf = new Map(points.map((point, index) => [point.key, index]));
  const exitRows = await db.select().from(exits).orderBy(exits.id);
  const legRows = await db.select().from(legs).orderBy(legs.id);
  if (legRows.length === 0) return undefined;
  const movementRows = await db.select().from(movements).orderBy(movements.id);
  const exitIndex = new Map(exitRows.map((row, index) => [row.id, index]));
  const legIndex = new Map(legRows.map((row, index) => [row.id, index]));
  return {
    junctions: points.map(({ id, lat, lon }) => ({ id, lat, lon })),
    driveSide,
    exits: exitRows.map((row) => ({
      id: row.code,
      junction: indexOf.get(row.junctionId) as number,
      bearingDeg: row.bearingDeg,
      line: Float64Array.from(row.line),
      lengthM: lengthOf(row.line),
      support: row.support,
    })),
    legs: legRows.map((row) => ({
      id: row.code,
      junction: indexOf.get(row.junctionId) as number,
      name: row.name,
      bearingDeg: row.bearingDeg,
      line: Float64Array.from(row.line),
      lengthM: lengthOf(row.line),
      upstreamExit: row.upstreamExitId === null ? -1 : (exitIndex.get(row.upstreamExitId) ?? -1),
      storageM: orNaN(row.storageM),
      freeSpeedMs: orNaN(row.freeSpeedMs),
      speedLimitMs: orNaN(row.speedLimitMs),
      origin: row.origin,
      stopLineOrigin: row.stopLineOrigin,
      locked: row.locked,
      support: row.support,
      doubts: row.doubts,
    })),
    movements: movementRows.map((row) => ({
      id: row.code,
      leg: legIndex.get(row.legId) as number,
      exit: exitIndex.get(row.exitId) as number,
      turnDeg: row.turnDeg,
      turn: row.turn,
      referenceS: orNaN(row.referenceS),
      referenceSource: row.referenceSource,
      referenceN: row.referenceN,
      cordonUpM: row.cordonUpM,
      cordonDownM: row.cordonDownM,
    })),
  };
}

/**
 * The keys that the rows of a network have, or that new ones will have when `storeNetwork` writes them: the database
 * gives out no key twice, so nobody sees these before. They hold for as long as nobody else writes networks.
 */
export async function reserveKeys(db: Db, network: Network): Promise<NetworkKeys> {
  return {
    legs: await keysOf(db, legs, "legs_id_seq", network.legs),
    exits: await keysOf(db, exits, "exits_id_seq", network.exits),
    movements: await keysOf(db, movements, "movements_id_seq", network.movements),
  };
}

async function keysOf(db: Db, table: typeof legs | typeof movements | typeof exits, sequence: string, list: readonly { id: string }[]): Promise<Int32Array> {
  const known = new Map((await db.select({ id: table.id, code: table.code }).from(table)).map((row) => [row.code, row.id]));
  const fresh = list.filter((item) => !known.has(item.id)).length;
  const { rows } = await db.execute<{ id: number }>(sql`select nextval(${sequence})::int as id from generate_series(1, ${fresh}::int)`);
  let next = 0;
  return Int32Array.from(list, (item) => known.get(item.id) ?? rows[next++].id);
}

/** Writes what the pings taught; rows keep their keys by the identity that the core carries on. */
export async function storeNetwork(db: Db, network: Network, junctionKeys: readonly number[], reserved?: NetworkKeys): Promise<NetworkKeys> {
  const keys = reserved ?? (await reserveKeys(db, network));
  await inSteps(network.exits, async (some, from) =>
    db
      .insert(exits)
      .values(
        some.map((exit, i) => ({
          id: keys.exits[from + i],
          code: exit.id,
          junctionId: junctionKeys[exit.junction],
          bearingDeg: exit.bearingDeg,
          line: Array.from(exit.line),
          support: exit.support,
          methodVersion: METHOD_VERSION,
        })),
      )
      .onConflictDoUpdate({ target: exits.code, set: incoming(exits, ["bearingDeg", "line", "support", "methodVersion"]) }),
  );
  await inSteps(network.legs, async (some, from) =>
    db
      .insert(legs)
      .values(
        some.map((leg, i) => ({
          id: keys.legs[from + i],
          code: leg.id,
          junctionId: junctionKeys[leg.junction],
          name: leg.name,
          bearingDeg: leg.bearingDeg,
          line: Array.from(leg.line),
          upstreamExitId: leg.upstreamExit < 0 ? null : keys.exits[leg.upstreamExit],
          storageM: nullable(leg.storageM),
          freeSpeedMs: nullable(leg.freeSpeedMs),
          speedLimitMs: nullable(leg.speedLimitMs),
          origin: leg.origin,
          stopLineOrigin: leg.stopLineOrigin,
          locked: leg.locked,
          support: leg.support,
          doubts: leg.doubts,
          methodVersion: METHOD_VERSION,
        })),
      )
      .onConflictDoUpdate({
        target: legs.code,
        set: incoming(legs, [
          "name",
          "bearingDeg",
          "line",
          "upstreamExitId",
          "storageM",
          "freeSpeedMs",
          "speedLimitMs",
          "origin",
          "stopLineOrigin",
          "support",
          "doubts",
          "methodVersion",
        ]),
      }),
  );
  await inSteps(network.movements, async (some, from) =>
    db
      .insert(movements)
      .values(
        some.map((movement, i) => ({
          id: keys.movements[from + i],
          code: movement.id,
          legId: keys.legs[movement.leg],
          exitId: keys.exits[movement.exit],
          turnDeg: movement.turnDeg,
          turn: movement.turn,
          referenceS: nullable(movement.referenceS),
          referenceSource: movement.referenceSource,
          referenceN: movement.referenceN,
          cordonUpM: movement.cordonUpM,
          cordonDownM: movement.cordonDownM,
          methodVersion: METHOD_VERSION,
        })),
      )
      .onConflictDoUpdate({
        target: movements.code,
        set: incoming(movements, [
          "turnDeg",
          "turn",
          "referenceS",
          "referenceSource",
          "referenceN",
          "cordonUpM",
          "cordonDownM",
          "methodVersion",
        ]),
      }),
  );
  await dropUnused(db, network);
  return keys;
}

/** Rows that the core no longer knows and that no traversal rests on would only haunt the plan of a junction. */
async function dropUnused(db: Db, network: Network): Promise<void> {
  const gone = async (table: typeof legs | typeof movements | typeof exits, codes: string[]) => {
    const known = await db.select({ id: table.id, code: table.code }).from(table);
    const keep = new Set(codes);
    return known.filter((row) => !keep.has(row.code)).map((row) => row.id);
  };
  const goneMovements = await gone(movements, network.movements.map((movement) => movement.id));
  if (goneMovements.length > 0) {
    await db.delete(movements).where(
      sql`${inArray(movements.id, goneMovements)} and not exists (select 1 from traversals where traversals.movement_id = ${movements.id})`,
    );
  }
  const goneLegs = await gone(legs, network.legs.map((leg) => leg.id));
  if (goneLegs.length > 0) {
    await db.delete(legs).where(
      sql`${inArray(legs.id, goneLegs)} and not exists (select 1 from movements where movements.leg_id = ${legs.id})`,
    );
  }
  const goneExits = await gone(exits, network.exits.map((exit) => exit.id));
  if (goneExits.length > 0) {
    await db.delete(exits).where(
      sql`${inArray(exits.id, goneExits)} and not exists (select 1 from movements where movements.exit_id = ${exits.id}) and not exists (select 1 from legs where legs.upstream_exit_id = ${exits.id})`,
    );
  }
}

async function inSteps<T>(list: readonly T[], write: (some: T[], from: number) => Promise<unknown>): Promise<void> {
  for (let from = 0; from < list.length; from += ROWS_PER_STATEMENT) await write(list.slice(from, from + ROWS_PER_STATEMENT), from);
}

/** `excluded.<column>` for each of the named columns. */
function incoming<T extends object>(table: T, names: (keyof T & string)[]): Record<string, SQL> {
  const columns = table as Record<string, AnyPgColumn>;
  return Object.fromEntries(names.map((name) => [name, sql.raw(`excluded.${columns[name].name}`)]));
}
