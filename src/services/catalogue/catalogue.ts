import { eq, sql } from "drizzle-orm";
import type { Catalogue } from "@/core/scores/types";
import type { Db } from "@/db/client";
import { corridors, junctions, legs, movements, settings } from "@/db/schema";
import type { Turn } from "@/core/types";
import { processMemory } from "../process-memory";

export interface CatalogueJunction {
  id: number;
  code: string;
  name: string;
  lat: number;
  lon: number;
  corridorId: number | null;
  corridor: string | null;
}

export interface CatalogueLeg {
  id: number;
  junctionId: number;
  name: string;
  bearingDeg: number;
  storageM: number | null;
}

/** Names and keys that turn scores into rows; small, and the same until the data change. */
export interface CityCatalogue {
  version: number;
  junctions: Map<number, CatalogueJunction>;
  legs: Map<number, CatalogueLeg>;
  legsOfJunction: Map<number, CatalogueLeg[]>;
  movements: Map<number, { id: number; legId: number; turn: Turn }>;
  keys: Catalogue;
}

const DATA_VERSION = "data_version";
const cache = processMemory<object, CityCatalogue>("catalogue");

/** Raised in the transaction of every change to junctions, legs or traversals: caches compare it. */
export async function raiseDataVersion(db: Db): Promise<void> {
  await db
    .insert(settings)
    .values({ key: DATA_VERSION, value: 1 })
    .onConflictDoUpdate({ target: settings.key, set: { value: sql`to_jsonb((${settings.value})::text::int + 1)`, updatedAt: sql`now()` } });
}

export async function dataVersion(db: Db): Promise<number> {
  const [row] = await db.select({ value: settings.value }).from(settings).where(eq(settings.key, DATA_VERSION));
  return row ? Number(row.value) : 0;
}

/** Changes with the data, and from one database to the next. */
export async function dataStamp(db: Db): Promise<string> {
  const [row] = await db.select({ value: settings.value, at: settings.updatedAt }).from(settings).where(eq(settings.key, DATA_VERSION));
  return row ? `${Number(row.value)}-${row.at.getTime().toString(36)}` : "0";
}

export async function cityCatalogue(db: Db): Promise<CityCatalogue> {
  const version = await dataVersion(db);
  const known = cache.get(db);
  if (known?.version === version) return known;
  const read = await readCatalogue(db, version);
  // The same object as long as no movement or leg has come or gone: what scores know by it stays.
  const fresh = known && isSame(known.keys, read.keys) ? { ...read, keys: known.keys } : read;
  cache.set(db, fresh);
  return fresh;
}

function isSame(a: Catalogue, b: Catalogue): boolean {
  return (
    a.movements.length === b.movements.length &&
    a.legs.length === b.legs.length &&
    a.movements.every((one, k) => one.key === b.movements[k].key && one.leg === b.movements[k].leg && one.junction === b.movements[k].junction && one.turn === b.movements[k].turn) &&
    a.legs.every((one, k) => one.key === b.legs[k].key && one.junction === b.legs[k].junction && Object.is(one.storageM, b.legs[k].storageM))
  );
}

async function readCatalogue(db: Db, version: number): Promise<CityCatalogue> {
  const junctionRows = await db
    .select({
      id: junctions.id,
      code: junctions.code,
      name: junctions.name,
      lat: junctions.lat,
      lon: junctions.lon,
      corridorId: junctions.corridorId,
      corridor: corridors.name,
    })
    .from(junctions)
    .leftJoin(corridors, eq(corridors.id, junctions.corridorId))
    .orderBy(junctions.id);
  const legRows = await db
    .select({ id: legs.id, junctionId: legs.junctionId, name: legs.name, bearingDeg: legs.bearingDeg, storageM: legs.storageM })
    .from(legs)
    .orderBy(legs.id);
  const movementRows = await db
    .select({ id: movements.id, legId: movements.legId, turn: movements.turn })
    .from(movements)
    .orderBy(movements.id);

  const legMap = new Map(legRows.map((row) => [row.id, row]));
  const legsOfJunction = new Map<number, CatalogueLeg[]>();
  for (const leg of legRows) {
    const list = legsOfJunction.get(leg.junctionId);
    if (list) list.push(leg);
    else legsOfJunction.set(leg.junctionId, [leg]);
  }
  return {
    version,
    junctions: new Map(junctionRows.map((row) => [row.id, row])),
    legs: legMap,
    legsOfJunction,
    movements: new Map(movementRows.map((row) => [row.id, row])),
    keys: {
      movements: movementRows.map((row) => ({
        key: row.id,
        leg: row.legId,
        junction: legMap.get(row.legId)?.junctionId ?? -1,
        turn: row.turn,
      })),
      legs: legRows.map((row) => ({ key: row.id, junction: row.junctionId, storageM: row.storageM ?? NaN })),
    },
  };
}
