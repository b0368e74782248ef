import { createCandidates, type Candidates } from "@/core/match/candidates";
import type { StreetGraph } from "@/core/match/graph";
import { DEAREST_STEP, MATCHING } from "@/core/match/matching";
import type { Trips } from "@/core/pings/trips";

/** States of one ping: its places, and the one off the network. */
export const WIDTH: number = MATCHING.candidates + 1;
export const OFF: number = MATCHING.candidates;

/** Columns of the pings of a trip that take part, and of their states; made once and used for trip after trip. */
export interface Trellis {
  ping: Uint32Array;
  cell: Int32Array;
  x: Float64Array;
  y: Float64Array;
  near: Candidates;
  cost: Float64Array;
  back: Int8Array;
  /** 1 where the step to a state is a way over the network, 0 where it led over unknown streets. */
  isWay: Uint8Array;
  chosen: Int8Array;
}

/** Room for the longest of the trips. */
export function createTrellis(trips: Trips): Trellis {
  let longest = 0;
  for (let k = 0; k < trips.count; k++) longest = Math.max(longest, trips.tripOffset[k + 1] - trips.tripOffset[k]);
  return {
    ping: new Uint32Array(longest),
    cell: new Int32Array(longest),
    x: new Float64Array(longest),
    y: new Float64Array(longest),
    near: createCandidates(longest),
    cost: new Float64Array(longest * WIDTH),
    back: new Int8Array(longest * WIDTH),
    isWay: new Uint8Array(longest * WIDTH),
    chosen: new Int8Array(longest),
  };
}

export function secondsBetween(trips: Trips, trellis: Trellis, a: number, b: number): number {
  return (trips.tMs[trellis.ping[b]] - trips.tMs[trellis.ping[a]]) / 1000;
}

export function chordBetween(trellis: Trellis, a: number, b: number): number {
  const dx = trellis.x[b] - trellis.x[a];
  const dy = trellis.y[b] - trellis.y[a];
  return Math.sqrt(dx * dx + dy * dy);
}

/** Cost of going from one place to another in the given time; Infinity where no way costs less than DEAREST_STEP. */
export function stepCost(graph: StreetGraph, near: Candidates, a: number, b: number, chord: number, seconds: number): number {
  const from = near.link[a];
  const to = near.link[b];
  const reach = MATCHING.fastestMs * seconds + MATCHING.reachSpareM;
  let cost = 0;
  let way = near.position[b] - near.position[a];
  if (from !== to || way < -MATCHING.loopM) {
    const { routes } = graph;
    const row = routes.find(from, to, longestWay(reach, chord));
    if (row < 0) return Infinity;
    way = graph.stopAt[from] - near.position[a] + routes.wayM[row] + near.position[b];
    cost = routes.cost[row];
  }
  if (way < -MATCHING.backFreeM) cost += (-way - MATCHING.backFreeM) / MATCHING.backSpreadM;
  if (way > reach) cost += (way - reach) / MATCHING.reachSpreadM;
  const detour = way > 0 ? Math.abs(way - chord) : chord;
  return cost + detour / (MATCHING.detourM + MATCHING.detourShare * chord);
}

/** Any longer way costs DEAREST_STEP or more. */
function longestWay(reach: number, chord: number): number {
  return Math.min(reach + DEAREST_STEP * MATCHING.reachSpreadM, chord + DEAREST_STEP * (MATCHING.detourM + MATCHING.detourShare * chord));
}
