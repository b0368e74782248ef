import { quantileInPlace } from "@/core/stats/quantile-in-place";
import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import { clusterVariance } from "./cluster-variance";
import { addToTally, createTally, type Clusters, type RatioTally } from "./ratio-tally";
import type { ScreenDay } from "./types";

const QUARTER_S = 900;

/** What is added up for the queues of each leg. */
export interface ReachLevel {
  spill: RatioTally;
  reachM: number[][];
  reachEstimateM: number[][];
}

/** The columns of one entry for a leg and quarter. */
type LegColumns = Pick<ScreenDay, "reachM" | "reachEstimateM" | "spilledS" | "observedS">;

export function createReachLevel(units: number, clusters: Clusters): ReachLevel {
  const lists = (): number[][] => Array.from({ length: units }, () => []);
  return { spill: createTally(units, clusters), reachM: lists(), reachEstimateM: lists() };
}

/** Adds entry k; what is missing in it is left out. */
export function addLegQuarter(level: ReachLevel, unit: number, columns: LegColumns, k: number): void {
  const { reachM, reachEstimateM, spilledS, observedS } = columns;
  if (!Number.isNaN(reachM[k])) level.reachM[unit].push(reachM[k]);
  if (!Number.isNaN(reachEstimateM[k])) level.reachEstimateM[unit].push(reachEstimateM[k]);
  if (observedS[k] > 0 && !Number.isNaN(spilledS[k])) addToTally(level.spill, unit, observedS[k], spilledS[k]);
}

/**
 * Share of the observed time that the leg spilled back, with Wilson's interval. One quarter of an hour counts as one
 * observation, since queues last; for fewer where days or neighbouring quarters differ more than that would let them.
 */
export function spillEstimate(level: ReachLevel, unit: number): Estimate {
  const observedS = level.spill.base[unit];
  if (!(observedS > 0)) return { value: NaN, low: NaN, high: NaN };
  const value = Math.min(1, level.spill.total[unit] / observedS);
  const { variance } = clusterVariance(level.spill, unit);
  const atMost = observedS / QUARTER_S;
  const effective = variance > 0 ? Math.min(atMost, Math.max(1, (value * (1 - value)) / variance)) : atMost;
  return { value, ...wilsonInterval(value, effective) };
}

/** Quantile with the interval of Woodruff (Journal of the American Statistical Association 47, 1952). */
export function quantileEstimate(values: number[], p: number): Estimate {
  const scratch = new Float32Array(values);
  const at = (share: number): number => quantileInPlace(scratch, 0, scratch.length, share);
  if (values.length === 0) return { value: NaN, low: NaN, high: NaN };
  const { low, high } = wilsonInterval(p, values.length);
  return { value: at(p), low: at(low), high: at(high) };
}

/** Median and 95th percentile of what was observed; NaN of nothing. */
export function reachQuantiles(values: number[]): { reachP50M: number; reachP95M: number } {
  const scratch = new Float32Array(values);
  const at = (share: number): number => quantileInPlace(scratch, 0, scratch.length, share);
  return { reachP50M: at(0.5), reachP95M: at(0.95) };
}
