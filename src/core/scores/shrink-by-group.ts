import { shrinkMeans } from "@/core/stats/empirical-bayes";
import { Z_975 } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import type { MeanIntervals } from "./mean-intervals";

/** A group with fewer units than this is shrunk to all units together. */
const LEAST_PEERS = 5;
/** Added before the logarithm is taken, s: between free passage and 10 s differences count as such, above as ratios. */
const SHIFT_S = 10;
/** Means below this much under no delay count as that. */
const LEAST_DELAY_S = -5;
/** Traversals that the peers' mean counts for in the level at which a unit's standard error is judged. */
const PEER_WEIGHT = 8;

export interface ShrunkUnits {
  /** Shrunk value and its standard deviation as they were worked out, log(delay + 10 s): for draws of ranks. NaN where nobody was seen. */
  log: Float64Array;
  logSd: Float64Array;
  /** In seconds. */
  estimate(unit: number): Estimate;
}

/**
 * Empirical Bayes within groups of peers. Delays of a city are skewed and their scatter goes with their size, so that
 * the normal-normal model holds for log(delay + 10 s): on the plain scale one heavily delayed and well observed unit
 * would be drawn far outside its own interval. `vehicles` are the traversals of each unit. O(units).
 */
export function shrinkByGroup(intervals: MeanIntervals, vehicles: ArrayLike<number>, group: ArrayLike<number>, groups: number): ShrunkUnits {
  const units = intervals.value.length;
  const log = new Float64Array(units).fill(NaN);
  const logSd = new Float64Array(units).fill(NaN);
  const seen: number[] = [];
  for (let u = 0; u < units; u++) if (intervals.variance[u] > 0) seen.push(u);
  for (let g = 0; g < groups; g++) {
    const own = seen.filter((u) => group[u] === g);
    if (own.length === 0) continue;
    const peers = own.length >= LEAST_PEERS ? own : seen;
    const { y, v } = onLogScale(peers, intervals, vehicles);
    const shrunk = shrinkMeans(y, v);
    peers.forEach((u, k) => {
      if (group[u] !== g) return;
      log[u] = shrunk.value[k];
      logSd[u] = shrunk.sd[k];
    });
  }
  const seconds = (x: number): number => Math.exp(x) - SHIFT_S;
  return {
    log,
    logSd,
    estimate: (u) => ({ value: seconds(log[u]), low: seconds(log[u] - Z_975 * logSd[u]), high: seconds(log[u] + Z_975 * logSd[u]) }),
  };
}

/** Means and variances by the delta method; the level is the unit's mean leant on its peers', lest a lucky low mean look exact. */
function onLogScale(peers: number[], intervals: MeanIntervals, vehicles: ArrayLike<number>): { y: number[]; v: number[] } {
  const delayS = (u: number): number => Math.max(LEAST_DELAY_S, intervals.value[u]);
  let total = 0;
  let n = 0;
  for (const u of peers) {
    total += vehicles[u] * delayS(u);
    n += vehicles[u];
  }
  const level = (u: number): number => (vehicles[u] * delayS(u) + PEER_WEIGHT * (total / n)) / (vehicles[u] + PEER_WEIGHT);
  return {
    y: peers.map((u) => Math.log(delayS(u) + SHIFT_S)),
    v: peers.map((u) => intervals.variance[u] / (Math.max(LEAST_DELAY_S, level(u)) + SHIFT_S) ** 2),
  };
}
