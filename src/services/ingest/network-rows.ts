import { asc, inArray, sql } from "drizzle-orm";
import { lengthOf } from "@/core/geometry/polyline";
import { METHOD_VERSION } from "@/core/method-version";
import type { DriveSide, JunctionPoint, Network } from "@/core/types";
import type { Db } from "@/db/client";
import { exits, junctions, legs, movements } from "@/db/schema";

/** Two files at once would both learn the same new legs; they, and changes of legs, take turns. */
export const INGEST_LOCK = 7_401_160;

const ROWS_PER_STATEMENT = 5000;

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
  await upsert(db, EXITS, network.exits, (exit, i) => ({
    id: keys.exits[i],
    code: exit.id,
    junction_id: junctionKeys[exit.junction],
    bearing_deg: exit.bearingDeg,
    line: Array.from(exit.line),
    support: exit.support,
    method_version: METHOD_VERSION,
  }));
  await upsert(db, LEGS, network.legs, (leg, i) => ({
    id: keys.legs[i],
    code: leg.id,
    junction_id: junctionKeys[leg.junction],
    name: leg.name,
    bearing_deg: leg.bearingDeg,
    line: Array.from(leg.line),
    upstream_exit_id: leg.upstreamExit < 0 ? null : keys.exits[leg.upstreamExit],
    storage_m: nullable(leg.storageM),
    free_speed_ms: nullable(leg.freeSpeedMs),
    speed_limit_ms: nullable(leg.speedLimitMs),
    origin: leg.origin,
    stop_line_origin: leg.stopLineOrigin,
    locked: leg.locked,
    support: leg.support,
    doubts: leg.doubts,
    method_version: METHOD_VERSION,
  }));
  await upsert(db, MOVEMENTS, network.movements, (movement, i) => ({
    id: keys.movements[i],
    code: movement.id,
    leg_id: keys.legs[movement.leg],
    exit_id: keys.exits[movement.exit],
    turn_deg: movement.turnDeg,
    turn: movement.turn,
    reference_s: nullable(movement.referenceS),
    reference_source: movement.referenceSource,
    reference_n: movement.referenceN,
    cordon_up_m: movement.cordonUpM,
    cordon_down_m: movement.cordonDownM,
    method_version: METHOD_VERSION,
  }));
  await dropUnused(db, network);
  return keys;
}

/** A table with the type of each of its columns that is written; those that a known row keeps are named apart. */
interface Target<C extends string> {
  table: string;
  columns: Record<C, string>;
  kept: readonly C[];
}

function target<C extends string>(table: string, columns: Record<C, string>, kept: readonly NoInfer<C>[]): Target<C> {
  return { table, columns, kept };
}

const EXITS = target(
  "exits",
  { id: "int", code: "text", junction_id: "int", bearing_deg: "real", line: "float8[]", support: "int", method_version: "int" },
  ["id", "code", "junction_id"],
);
const LEGS = target(
  "legs",
  {
    id: "int", code: "text", junction_id: "int", name: "text", bearing_deg: "real", line: "float8[]", upstream_exit_id: "int", storage_m: "real",
    free_speed_ms: "real", speed_limit_ms: "real", origin: "text", stop_line_origin: "text", locked: "boolean", support: "int", doubts: "jsonb", method_version: "int",
  },
  ["id", "code", "junction_id", "locked"],
);
const MOVEMENTS = target(
  "movements",
  {
    id: "int", code: "text", leg_id: "int", exit_id: "int", turn_deg: "real", turn: "text", reference_s: "real", reference_source: "text", reference_n: "int",
    cordon_up_m: "real", cordon_down_m: "real", method_version: "int",
  },
  ["id", "code", "leg_id", "exit_id"],
);

/** One text for many rows: a parameter for each value takes the query builder longer than the database needs for all of it. */
async function upsert<T, C extends string>(db: Db, { table, columns, kept }: Target<C>, list: readonly T[], rowOf: (item: T, index: number) => Record<C, unknown>): Promise<void> {
  const names = Object.keys(columns) as C[];
  const typed = names.map((name) => `${name} ${columns[name]}`).join(", ");
  const set = names.filter((name) => !kept.includes(name)).map((name) => `${name} = excluded.${name}`).join(", ");
  for (let from = 0; from < list.length; from += ROWS_PER_STATEMENT) {
    const rows = list.slice(from, from + ROWS_PER_STATEMENT).map((item, i) => rowOf(item, from + i));
    await db.execute(
      sql`${sql.raw(`insert into ${table} (${names.join(", ")}) select ${names.join(", ")} from json_to_recordset(`)}${JSON.stringify(rows)}${sql.raw(`::json) as given(${typed}) on conflict (code) do update set ${set}`)}`,
    );
  }
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
