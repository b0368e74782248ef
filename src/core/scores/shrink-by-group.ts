import { shrinkMeans } from "@/core/stats/empirical-bayes";
import { Z_975 } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import type { MeanIntervals } from "./mean-intervals";

/** A group with fewer units than this is shrunk to all units together. */
const LEAST_PEERS = 5;

export interface ShrunkUnits {
  value: Float64Array;
  sd: Float64Array;
  estimate(unit: number): Estimate;
}

/** Empirical Bayes within groups of peers; NaN for units that were not seen. O(units). */
export function shrinkByGroup(intervals: MeanIntervals, group: ArrayLike<number>, groups: number): ShrunkUnits {
  const units = intervals.value.length;
  const value = new Float64Array(units).fill(NaN);
  const sd = new Float64Array(units).fill(NaN);
  const seen: number[] = [];
  for (let u = 0; u < units; u++) if (intervals.variance[u] > 0) seen.push(u);
  for (let g = 0; g < groups; g++) {
    const own = seen.filter((u) => group[u] === g);
    if (own.length === 0) continue;
    const peers = own.length >= LEAST_PEERS ? own : seen;
    const shrunk = shrinkMeans(
      peers.map((u) => intervals.value[u]),
      peers.map((u) => intervals.variance[u]),
    );
    peers.forEach((u, k) => {
      if (group[u] !== g) return;
      value[u] = shrunk.value[k];
      sd[u] = shrunk.sd[k];
    });
  }
  return {
    value,
    sd,
    estimate: (u) => ({ value: value[u], low: value[u] - Z_975 * sd[u], high: value[u] + Z_975 * sd[u] }),
  };
}
