import { and, eq, inArray } from "drizzle-orm";
import { movePoints, planeAt } from "@/core/geometry/plane";
import { decodeNearPings, encodeNearPings } from "@/core/pings/near-sample";
import type { Db } from "@/db/client";
import { exits, legs, pingClouds } from "@/db/schema";

export interface Place {
  lat: number;
  lon: number;
}

export interface MovedJunction {
  id: number;
  from: Place;
  to: Place;
}

/**
 * Lines and pings are kept in metres from their junction's point: where a file puts that point elsewhere, they stay
 * where the street is.
 */
export async function keepStreetsInPlace(db: Db, moved: readonly MovedJunction[]): Promise<void> {
  for (const junction of moved) {
    const move = mover(junction);
    for (const table of [legs, exits]) {
      const rows = await db.select({ id: table.id, line: table.line }).from(table).where(eq(table.junctionId, junction.id));
      for (const { id, line } of rows) await db.update(table).set({ line: Array.from(move(Float64Array.from(line))) }).where(eq(table.id, id));
    }
  }
  await moveClouds(db, moved);
}

function mover({ from, to }: MovedJunction): (points: Float64Array) => Float64Array {
  const [before, after] = [planeAt(from.lat, from.lon), planeAt(to.lat, to.lon)];
  return (points) => movePoints(points, before, after);
}

async function moveClouds(db: Db, moved: readonly MovedJunction[]): Promise<void> {
  if (moved.length === 0) return;
  const byId = new Map(moved.map((junction) => [junction.id, junction]));
  const rows = await db.select().from(pingClouds).where(inArray(pingClouds.junctionId, [...byId.keys()]));
  for (const { junctionId, uploadId, payload } of rows) {
    const near = decodeNearPings(payload);
    const [east, north] = mover(byId.get(junctionId) as MovedJunction)(Float64Array.of(0, 0));
    const shifted = { ...near, eastM: near.eastM.map((x) => x + east), northM: near.northM.map((y) => y + north) };
    await db
      .update(pingClouds)
      .set({ payload: encodeNearPings(shifted) })
      .where(and(eq(pingClouds.junctionId, junctionId), eq(pingClouds.uploadId, uploadId)));
  }
}
