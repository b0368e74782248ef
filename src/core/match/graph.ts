import { planeAt, type Plane } from "@/core/geometry/plane";
import { reversed } from "@/core/geometry/polyline";
import { createBoxes, type Box } from "@/core/match/box";
import { createLinkGrid, type LinkGrid } from "@/core/match/link-grid";
import { MATCHING } from "@/core/match/matching";
import { createRouteTable, type RouteTable } from "@/core/match/routes";
import { cutSegments, type LinkLine, type Segments } from "@/core/match/segments";
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
  segments: Segments;
  grid: LinkGrid;
  /** Ways from link to link; found when they are first asked for. */
  routes: RouteTable;
  /** The way through a junction. */
  box(leg: number, exit: number): Box;
}

/** Builds the graph and the grid of its links. O(total length). */
export function createGraph(network: Network): StreetGraph {
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
  const lines: LinkLine[] = [];
  network.legs.forEach((drawn, i) => {
    leg[i] = i;
    exit[i] = drawn.upstreamExit;
    home[i] = drawn.junction;
    stopAt[i] = drawn.lengthM;
    freeSpeedMs[i] = drawn.freeSpeedMs;
    const beforeM = drawn.upstreamExit >= 0 ? MATCHING.boxOverlapM : 0;
    lines.push({ line: reversed(drawn.line), beforeM, afterM: MATCHING.boxOverlapM });
  });
  open.forEach((e, n) => {
    const i = network.legs.length + n;
    const drawn = network.exits[e];
    exit[i] = e;
    home[i] = drawn.junction;
    stopAt[i] = drawn.lengthM;
    lines.push({ line: drawn.line, beforeM: MATCHING.boxOverlapM, afterM: 0 });
  });
  const segments = cutSegments(lines);
  const grid = createLinkGrid(segments, home, planes);
  const routes = createRouteTable({ network, leg, exit, stopAt });
  return { network, planes, count, leg, exit, home, stopAt, freeSpeedMs, segments, grid, routes, box: createBoxes(network) };
}
