import { bearingDeg, signedTurnDeg } from "@/core/geometry/angles";
import { latAt, lonAt, planeAt, type Plane } from "@/core/geometry/plane";
import { pointAt, reversed, slice } from "@/core/geometry/polyline";
import type { ClaimIndex, JunctionIndex } from "@/core/index/junction-index";
import { MATCHING } from "@/core/match/matching";
import type { Network } from "@/core/types";

/**
 * The directed streets that trips are matched over: one link for each leg, and one for each exit that feeds no leg.
 * Position on a link grows in the direction of travel: 0 where the upstream junction's box ends, `stopAt` at the stop line.
 * Links go on straight a little into the boxes at both ends.
 */
export interface StreetGraph {
  network: Network;
  planes: Plane[];
  count: number;
  /** Leg at the downstream end, -1 for an exit that leads into the open. */
  leg: Int32Array;
  /** Exit at the upstream end, -1 for a leg that comes from the open. */
  exit: Int32Array;
  /** Junction whose plane the link is drawn in. */
  home: Int32Array;
  /** Position of the stop line; of the far end for a link without a leg. */
  stopAt: Float64Array;
  freeSpeedMs: Float64Array;
  /** Segments: segment n goes from (x0, y0) to (x1, y1) of the home plane, starting at position `at`. */
  segments: Segments;
  claims: ClaimIndex;
  /** Links that begin with an exit, and movements that leave a leg. */
  linksOfExit: number[][];
  exitsOfJunction: number[][];
  /** Length of the way through the box from a leg's stop line to an exit's beginning, by leg then exit of its junction. */
  boxWayM(leg: number, exit: number): number;
}

export interface Segments {
  link: Int32Array;
  at: Float64Array;
  x0: Float64Array;
  y0: Float64Array;
  /** Unit vector of travel. */
  ux: Float64Array;
  uy: Float64Array;
  bearingDeg: Float64Array;
  lengthM: Float64Array;
}

/** Builds the graph and claims the cells along its links. O(total length). */
export function createGraph(network: Network, index: JunctionIndex): StreetGraph {
  const planes = network.junctions.map((junction) => planeAt(junction.lat, junction.lon));
  const feeds = new Uint8Array(network.exits.length);
  for (const leg of network.legs) if (leg.upstreamExit >= 0) feeds[leg.upstreamExit] = 1;
  const open = network.exits.map((_, i) => i).filter((i) => feeds[i] === 0);
  const count = network.legs.length + open.length;
  const leg = new Int32Array(count).fill(-1);
  const exit = new Int32Array(count).fill(-1);
  const home = new Int32Array(count);
  const stopAt = new Float64Array(count);
  const freeSpeedMs = new Float64Array(count).fill(13.9);
  const lines: Float64Array[] = [];
  const starts = new Float64Array(count);
  network.legs.forEach((drawn, i) => {
    leg[i] = i;
    exit[i] = drawn.upstreamExit;
    home[i] = drawn.junction;
    stopAt[i] = drawn.lengthM;
    freeSpeedMs[i] = drawn.freeSpeedMs;
    starts[i] = drawn.upstreamExit >= 0 ? -MATCHING.boxOverlapM : 0;
    lines.push(slice(reversed(drawn.line), starts[i], drawn.lengthM + MATCHING.boxOverlapM));
  });
  open.forEach((e, n) => {
    const i = network.legs.length + n;
    exit[i] = e;
    home[i] = network.exits[e].junction;
    stopAt[i] = network.exits[e].lengthM;
    starts[i] = -MATCHING.boxOverlapM;
    lines.push(slice(network.exits[e].line, starts[i], network.exits[e].lengthM));
  });
  const segments = cutSegments(lines, starts);
  const linksOfExit: number[][] = network.exits.map(() => []);
  for (let i = 0; i < count; i++) if (exit[i] >= 0) linksOfExit[exit[i]].push(i);
  const exitsOfJunction: number[][] = network.junctions.map(() => []);
  network.exits.forEach((e, i) => exitsOfJunction[e.junction].push(i));
  const claims = claimSegments(segments, home, planes, index);
  return {
    network, planes, count, leg, exit, home, stopAt, freeSpeedMs, segments, claims, linksOfExit, exitsOfJunction,
    boxWayM: (l, e) => boxWay(network, l, e),
  };
}

/** Arc from stop line to exit: the chord, bent by the turn (a circle's arc over its chord). */
export function boxWay(network: Network, leg: number, exit: number): number {
  const from = network.legs[leg];
  const to = network.exits[exit];
  const chord = Math.hypot(to.line[0] - from.line[0], to.line[1] - from.line[1]);
  const half = (Math.min(150, Math.abs(signedTurnDeg(from.bearingDeg, to.bearingDeg))) * Math.PI) / 360;
  return half < 0.02 ? chord : (chord * half) / Math.sin(half);
}

function cutSegments(lines: Float64Array[], starts: Float64Array): Segments {
  let total = 0;
  for (const line of lines) total += line.length / 2 - 1;
  const out: Segments = {
    link: new Int32Array(total), at: new Float64Array(total),
    x0: new Float64Array(total), y0: new Float64Array(total),
    ux: new Float64Array(total), uy: new Float64Array(total), bearingDeg: new Float64Array(total), lengthM: new Float64Array(total),
  };
  let n = 0;
  lines.forEach((line, link) => {
    let at = starts[link];
    for (let v = 0; v + 3 < line.length; v += 2, n++) {
      const dx = line[v + 2] - line[v];
      const dy = line[v + 3] - line[v + 1];
      const length = Math.hypot(dx, dy);
      out.link[n] = link;
      out.at[n] = at;
      out.x0[n] = line[v];
      out.y0[n] = line[v + 1];
      out.ux[n] = length > 0 ? dx / length : 0;
      out.uy[n] = length > 0 ? dy / length : 0;
      out.bearingDeg[n] = length > 0 ? bearingDeg(dx, dy) : 0;
      out.lengthM[n] = length;
      at += length;
    }
  });
  return out;
}

function claimSegments(segments: Segments, home: Int32Array, planes: Plane[], index: JunctionIndex): ClaimIndex {
  const lat: number[] = [];
  const lon: number[] = [];
  const owner: number[] = [];
  for (let n = 0; n < segments.link.length; n++) {
    const plane = planes[home[segments.link[n]]];
    const pieces = Math.max(1, Math.ceil(segments.lengthM[n] / MATCHING.claimStepM));
    for (let p = 0; p < pieces; p++) {
      const along = ((p + 0.5) / pieces) * segments.lengthM[n];
      lat.push(latAt(plane, segments.y0[n] + along * segments.uy[n]));
      lon.push(lonAt(plane, segments.x0[n] + along * segments.ux[n]));
      owner.push(n);
    }
  }
  return index.claim({
    length: owner.length,
    lat: Float64Array.from(lat),
    lon: Float64Array.from(lon),
    radiusM: new Float64Array(owner.length).fill(MATCHING.sideLimitM + MATCHING.claimStepM / 2),
    owner: Uint32Array.from(owner),
  });
}

/** The way through a box as a line in the junction's plane: leg's end, a bend, exit's beginning. */
export function boxLine(network: Network, leg: number, exit: number): Float64Array {
  const from = reversed(network.legs[leg].line);
  const to = network.exits[exit].line;
  const n = from.length;
  const reach = Math.hypot(to[0] - from[n - 2], to[1] - from[n - 1]) / 2;
  const [ax, ay] = pointAt(from, network.legs[leg].lengthM + reach);
  const [bx, by] = pointAt(to, -reach);
  const out: number[] = [];
  for (let k = 0; k <= 8; k++) {
    const t = k / 8;
    const cx = (ax + bx) / 2;
    const cy = (ay + by) / 2;
    out.push(
      (1 - t) ** 2 * from[n - 2] + 2 * t * (1 - t) * cx + t * t * to[0],
      (1 - t) ** 2 * from[n - 1] + 2 * t * (1 - t) * cy + t * t * to[1],
    );
  }
  return Float64Array.from(out);
}

