import { eastM } from "@/core/geometry/plane";
import type { StreetGraph } from "@/core/match/graph";
import { CELL, countOf, firstOf } from "@/core/match/link-grid";
import { DEAREST, MATCHING } from "@/core/match/matching";
import { SEGMENT } from "@/core/match/segments";

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
const SIDE_LIMIT2 = MATCHING.sideLimitM ** 2;
const PER_SPREAD = 1 / MATCHING.headingSpreadDeg;
const PER_BOX_SPREAD = 1 / MATCHING.boxHeadingSpreadDeg;
const COST_PER_SIDE2 = 0.5 / MATCHING.sideSpreadM ** 2;
/** In a box at a link's end up to this far before its end, m. */
const BOX_M = 5;

/**
 * Writes the best places of one ping, whose cell has the record `cell`, into row `n`, the nearest on each link; returns
 * how many. O(segments in its cell).
 */
export function findCandidates(
  graph: StreetGraph, cell: number, lat: number, lon: number, headingDeg: number, speedMs: number, out: Candidates, n: number,
): number {
  out.count[n] = 0;
  if (cell < 0) return 0;
  const { runs, records } = graph.grid;
  const { columns, link: linkOf } = graph.segments;
  const isFast = speedMs > MATCHING.headingMinSpeedMs;
  const hasHeading = headingDeg >= 0;
  // Once for each ping: the remainder of floating numbers is slow.
  const heading = headingDeg < 360 ? headingDeg : headingDeg % 360;
  const limitDeg = isFast ? MATCHING.headingLimitDeg : 180;
  const weight = isFast ? 0.5 : 0.2;
  const end = records[cell + CELL.end];
  let home = -1;
  let x = 0;
  let y = 0;
  for (let k = records[cell + CELL.first]; k < end; k++) {
    const first = firstOf(runs[k]);
    const link = linkOf[first];
    if (graph.home[link] !== home) {
      home = graph.home[link];
      const { lat0, lon0, metresPerLat, metresPerLon } = graph.planes[home];
      x = (lon - lon0) * metresPerLon;
      y = (lat - lat0) * metresPerLat;
      if (x > HALF_TURN_M || x < -HALF_TURN_M) x = eastM(graph.planes[home], lon);
    }
    const boxFrom = graph.stopAt[link] - BOX_M;
    let best = DEAREST;
    let place = 0;
    const stop = (first + countOf(runs[k])) * SEGMENT.width;
    for (let at = first * SEGMENT.width; at < stop; at += SEGMENT.width) {
      let angle = 0;
      if (hasHeading) {
        const off = Math.abs(columns[at + SEGMENT.bearingDeg] - heading);
        angle = off > 180 ? 360 - off : off;
        if (angle > limitDeg) continue;
      }
      const px = x - columns[at + SEGMENT.x];
      const py = y - columns[at + SEGMENT.y];
      const ux = columns[at + SEGMENT.ux];
      const uy = columns[at + SEGMENT.uy];
      const across = px * uy - py * ux;
      const along = px * ux + py * uy;
      const length = columns[at + SEGMENT.lengthM];
      const within = along < 0 ? 0 : along > length ? length : along;
      const beyond = along - within;
      const side2 = across * across + beyond * beyond;
      if (!(side2 <= SIDE_LIMIT2)) continue;
      const position = columns[at + SEGMENT.startM] + within;
      let cost = side2 * COST_PER_SIDE2;
      if (hasHeading) {
        const share = angle * (position < BOX_M || position > boxFrom ? PER_BOX_SPREAD : PER_SPREAD);
        const headingCost = weight * share * share;
        cost += headingCost < MATCHING.headingMostCost ? headingCost : MATCHING.headingMostCost;
      }
      if (cost < best) {
        best = cost;
        place = position;
      }
    }
    if (best < DEAREST) keep(out, n, link, place, best);
  }
  return out.count[n];
}

/** One place for each link; when the row is full the dearest gives way. */
function keep(out: Candidates, n: number, link: number, position: number, cost: number): void {
  const row = n * MATCHING.candidates;
  const count = out.count[n];
  let at = -1;
  let dearest = row;
  for (let c = row; c < row + count; c++) {
    if (out.link[c] === link) at = c;
    if (out.cost[c] > out.cost[dearest]) dearest = c;
  }
  if (at < 0 && count < MATCHING.candidates) {
    at = row + count;
    out.count[n] = count + 1;
  } else {
    if (at < 0) at = dearest;
    if (out.cost[at] <= cost) return;
  }
  out.link[at] = link;
  out.position[at] = position;
  out.cost[at] = cost;
}
