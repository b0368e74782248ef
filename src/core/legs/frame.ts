import { eastM, northM, planeAt, type Plane } from "@/core/geometry/plane";
import type { JunctionPoint } from "@/core/types";

/** Junctions with their planes and their neighbours. */
export interface Frame {
  junctions: JunctionPoint[];
  planes: Plane[];
  /** Other junctions within reach of each junction. */
  near: Neighbour[][];
  /** Distance to the nearest other junction; Infinity for a lone one. */
  nearestM: Float64Array;
}

export interface Neighbour {
  junction: number;
  /** Its point in this junction's plane, m. */
  x: number;
  y: number;
}

/** Planes and neighbours within `reachM` of each junction. O(n log n + pairs). */
export function createFrame(junctions: JunctionPoint[], reachM: number): Frame {
  const planes = junctions.map((junction) => planeAt(junction.lat, junction.lon));
  const near: Neighbour[][] = junctions.map(() => []);
  const nearestM = new Float64Array(junctions.length).fill(Infinity);
  const byLat = Uint32Array.from(junctions, (_, i) => i).sort((a, b) => junctions[a].lat - junctions[b].lat || a - b);
  for (let i = 0; i < byLat.length; i++) {
    const a = byLat[i];
    for (let k = i + 1; k < byLat.length; k++) {
      const b = byLat[k];
      const y = northM(planes[a], junctions[b].lat);
      if (y > reachM) break;
      const x = eastM(planes[a], junctions[b].lon);
      const distance = Math.hypot(x, y);
      if (distance > reachM) continue;
      near[a].push({ junction: b, x, y });
      near[b].push({ junction: a, x: eastM(planes[b], junctions[a].lon), y: northM(planes[b], junctions[a].lat) });
      nearestM[a] = Math.min(nearestM[a], distance);
      nearestM[b] = Math.min(nearestM[b], distance);
    }
  }
  for (const list of near) list.sort((p, q) => p.junction - q.junction);
  return { junctions, planes, near, nearestM };
}
