import { quantileSorted } from "@/core/stats/quantile";
import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import { clusterVariance } from "./cluster-variance";
import { addToTally, createTally, type RatioTally } from "./ratio-tally";

const QUARTER_S = 900;

/** What is added up for the queues of each leg. */
export interface ReachLevel {
  spill: RatioTally;
  reachM: number[][];
  reachEstimateM: number[][];
}

export function createReachLevel(units: number): ReachLevel {
  const lists = (): number[][] => Array.from({ length: units }, () => []);
  return { spill: createTally(units), reachM: lists(), reachEstimateM: lists() };
}

export interface LegQuarterFigures {
  reachM: number;
  reachEstimateM: number;
  spilledS: number;
  observedS: number;
}

export function addLegQuarter(level: ReachLevel, unit: number, figures: LegQuarterFigures): void {
  if (!Number.isNaN(figures.reachM)) level.reachM[unit].push(figures.reachM);
  if (!Number.isNaN(figures.reachEstimateM)) level.reachEstimateM[unit].push(figures.reachEstimateM);
  if (figures.observedS > 0 && !Number.isNaN(figures.spilledS)) addToTally(level.spill, unit, figures.observedS, figures.spilledS);
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
  if (values.length === 0) return { value: NaN, low: NaN, high: NaN };
  const sorted = Float64Array.from(values).sort();
  const { low, high } = wilsonInterval(p, sorted.length);
  return { value: quantileSorted(sorted, p), low: quantileSorted(sorted, low), high: quantileSorted(sorted, high) };
}
