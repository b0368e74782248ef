import { eastM } from "@/core/geometry/plane";
import type { StreetGraph } from "@/core/match/graph";
import { MATCHING } from "@/core/match/matching";

/** Places on links where each ping of a trip may have been; row n holds ping n's, `count[n]` of them. */
export interface Candidates {
  count: Uint8Array;
  link: Int32Array;
  position: Float64Array;
  /** Cost of the ping's distance and heading. */
  cost: Float64Array;
}

export function createCandidates(pings: number): Candidates {
  const size = pings * MATCHING.candidates;
  return {
    count: new Uint8Array(pings),
    link: new Int32Array(size),
    position: new Float64Array(size),
    cost: new Float64Array(size),
  };
}

/** Only across the 180th meridian does a plain difference of longitudes reach this far, m. */
const HALF_TURN_M = 1e6;

/** Writes the best places of one ping into row `n`, the nearest on each link; returns how many. */
export function findCandidates(
  graph: StreetGraph, lat: number, lon: number, headingDeg: number, speedMs: number, out: Candidates, n: number,
): number {
  out.count[n] = 0;
  const slot = graph.claims.find(lat, lon);
  if (slot < 0) return 0;
  const { segments } = graph;
  let plane = -1;
  let x = 0;
  let y = 0;
  for (let k = graph.claims.offsets[slot]; k < graph.claims.offsets[slot + 1]; k++) {
    const segment = graph.claims.owners[k];
    const link = segments.link[segment];
    if (graph.home[link] !== plane) {
      plane = graph.home[link];
      const { lat0, lon0, metresPerLat, metresPerLon } = graph.planes[plane];
      x = (lon - lon0) * metresPerLon;
      y = (lat - lat0) * metresPerLat;
      if (x > HALF_TURN_M || x < -HALF_TURN_M) x = eastM(graph.planes[plane], lon);
    }
    const px = x - segments.x0[segment];
    const py = y - segments.y0[segment];
    const ux = segments.ux[segment];
    const uy = segments.uy[segment];
    const across = px * uy - py * ux;
    if (across > MATCHING.sideLimitM || across < -MATCHING.sideLimitM) continue;
    const along = px * ux + py * uy;
    const within = Math.min(segments.lengthM[segment], Math.max(0, along));
    const beyond = along - within;
    const side2 = across * across + beyond * beyond;
    if (side2 > MATCHING.sideLimitM * MATCHING.sideLimitM) continue;
    const position = segments.at[segment] + within;
    let cost = (0.5 * side2) / (MATCHING.sideSpreadM * MATCHING.sideSpreadM);
    if (headingDeg >= 0) {
      const isInBox = position < 5 || position > graph.stopAt[link] - 5;
      const off = Math.abs(segments.bearingDeg[segment] - headingDeg) % 360;
      const angle = off > 180 ? 360 - off : off;
      if (angle > MATCHING.headingLimitDeg && speedMs > MATCHING.headingMinSpeedMs) continue;
      const spread = isInBox ? MATCHING.boxHeadingSpreadDeg : MATCHING.headingSpreadDeg;
      const weight = speedMs > MATCHING.headingMinSpeedMs ? 0.5 : 0.2;
      cost += Math.min(MATCHING.headingMostCost, weight * (angle / spread) ** 2);
    }
    keep(out, n, link, position, cost);
  }
  return out.count[n];
}

/** One place for each link; when the row is full the dearest gives way. */
function keep(out: Candidates, n: number, link: number, position: number, cost: number): void {
  const row = n * MATCHING.candidates;
  let at = -1;
  let dearest = row;
  for (let c = row; c < row + out.count[n]; c++) {
    if (out.link[c] === link) at = c;
    if (out.cost[c] > out.cost[dearest]) dearest = c;
  }
  if (at < 0 && out.count[n] < MATCHING.candidates) at = row + out.count[n]++;
  else if (at < 0) at = dearest;
  else if (out.cost[at] <= cost) return;
  if (at === dearest && out.count[n] === MATCHING.candidates && out.link[at] !== link && out.cost[at] <= cost) return;
  out.link[at] = link;
  out.position[at] = position;
  out.cost[at] = cost;
}
