import { QUARTER_MS } from "@/core/queues/options";
import { mean } from "@/core/stats/mean";
import { quantile } from "@/core/stats/quantile";
import { TURNS, type LegQuarters, type Network, type Traversals, type Turn } from "@/core/types";
import { LEAST_FOR_P95 } from "./delay-level";

/** One line of the screen command: a junction, leg and turn in one quarter of an hour or in all. NaN where the sample cannot say. */
export interface ScreenRow {
  /** Indices into `Network.junctions` and `Network.legs`. */
  junction: number;
  leg: number;
  /** Direction of travel at the stop line, clockwise from true north. */
  approachBearingDeg: number;
  turn: Turn;
  /** Start of the quarter, ms UTC; null for the whole time. */
  startMs: number | null;
  vehicles: number;
  meanDelayS: number;
  p95DelayS: number;
  stopShare: number;
  stopsPerVehicle: number;
  /** Of the leg, whatever the turn: farthest reach, with the tail that the sample is expected not to see. */
  queueReachM: number;
  /** Of the leg; share of the observed time. */
  spillbackShare: number;
}

interface LegSums {
  reachM: number;
  spilledS: number;
  observedS: number;
}

interface Group {
  leg: number;
  turn: number;
  /** NaN for the whole time. */
  startMs: number;
  members: number[];
}

/**
 * Rows in order of junction, leg, turn; of each first the whole time, then its quarters. A traversal belongs to the
 * quarter in which it passes the stop line. O(n log n).
 */
export function screenRows(network: Network, traversals: Traversals, quarters: LegQuarters): ScreenRow[] {
  const groups = groupTraversals(network, traversals);
  const sums = sumLegs(quarters);
  groups.sort(
    (a, b) =>
      network.legs[a.leg].junction - network.legs[b.leg].junction ||
      a.leg - b.leg ||
      a.turn - b.turn ||
      Number(!Number.isNaN(a.startMs)) - Number(!Number.isNaN(b.startMs)) ||
      a.startMs - b.startMs,
  );
  return groups.map((group) => rowOf(group, network, traversals, sums.get(sumKey(group.leg, group.startMs))));
}

function groupTraversals(network: Network, traversals: Traversals): Group[] {
  const groups = new Map<string, Group>();
  for (let i = 0; i < traversals.length; i++) {
    const movement = network.movements[traversals.movement[i]];
    const turn = TURNS.indexOf(movement.turn);
    for (const startMs of [NaN, Math.floor(traversals.stopLineMs[i] / QUARTER_MS) * QUARTER_MS]) {
      const key = `${movement.leg} ${turn} ${startMs}`;
      const group = groups.get(key);
      if (group) group.members.push(i);
      else groups.set(key, { leg: movement.leg, turn, startMs, members: [i] });
    }
  }
  return [...groups.values()];
}

function sumKey(leg: number, startMs: number): string {
  return `${leg} ${startMs}`;
}

function sumLegs(quarters: LegQuarters): Map<string, LegSums> {
  const sums = new Map<string, LegSums>();
  for (let k = 0; k < quarters.length; k++) {
    for (const startMs of [NaN, quarters.startMs[k]]) {
      const key = sumKey(quarters.leg[k], startMs);
      const sum = sums.get(key) ?? { reachM: NaN, spilledS: 0, observedS: 0 };
      const reachM = quarters.reachEstimateM[k];
      if (Number.isNaN(sum.reachM) || reachM > sum.reachM) sum.reachM = reachM;
      sum.spilledS += quarters.spilledS[k];
      sum.observedS += quarters.observedS[k];
      sums.set(key, sum);
    }
  }
  return sums;
}

function rowOf(group: Group, network: Network, traversals: Traversals, queue: LegSums | undefined): ScreenRow {
  const { members } = group;
  const leg = network.legs[group.leg];
  const delays = members.map((i) => traversals.delayS[i]);
  const stops = members.map((i) => traversals.stops[i]);
  const n = members.length;
  return {
    junction: leg.junction,
    leg: group.leg,
    approachBearingDeg: leg.bearingDeg,
    turn: TURNS[group.turn],
    startMs: Number.isNaN(group.startMs) ? null : group.startMs,
    vehicles: n,
    meanDelayS: mean(delays),
    p95DelayS: n >= LEAST_FOR_P95 ? quantile(delays, 0.95) : NaN,
    stopShare: stops.filter((s) => s > 0).length / n,
    stopsPerVehicle: mean(stops),
    queueReachM: queue ? queue.reachM : NaN,
    spillbackShare: queue && queue.observedS > 0 ? queue.spilledS / queue.observedS : NaN,
  };
}
