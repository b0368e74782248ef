import { quantileInPlace } from "@/core/stats/quantile-in-place";
import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import { clusterVariance } from "./cluster-variance";
import { histogramQuantile, type CodeHistogram } from "./code-histogram";
import { addToTally, type RatioTally } from "./ratio-tally";
import { reachOfCode, secondsOfCode } from "./stored-figures";

const QUARTER_S = 900;
const NOTHING: Estimate = Object.freeze({ value: NaN, low: NaN, high: NaN });

/** Adds the observed and spilled time of one leg quarter, given by their codes, unless one of them is not known. */
export function addSpill(tally: RatioTally, unit: number, observed: number, spilled: number): void {
  if (isSpillKnown(observed, spilled)) addToTally(tally, unit, secondsOfCode(observed), secondsOfCode(spilled));
}

/** Code 0 is unknown and code 1 is none. */
export function isSpillKnown(observed: number, spilled: number): boolean {
  return observed > 1 && spilled > 0;
}

/**
 * Share of the observed time that the leg spilled back, with Wilson's interval. One quarter of an hour counts as one
 * observation, since queues last; for fewer where days or neighbouring quarters differ more than that would let them.
 */
export function spillEstimate(spill: RatioTally, unit: number): Estimate {
  const observedS = spill.base[unit];
  if (!(observedS > 0)) return NOTHING;
  const value = Math.min(1, spill.total[unit] / observedS);
  const { variance } = clusterVariance(spill, unit);
  const atMost = observedS / QUARTER_S;
  const effective = variance > 0 ? Math.min(atMost, Math.max(1, (value * (1 - value)) / variance)) : atMost;
  return { value, ...wilsonInterval(value, effective) };
}

/** Quantile with the interval of Woodruff (Journal of the American Statistical Association 47, 1952). */
export function quantileEstimate(values: number[], p: number): Estimate {
  const scratch = new Float32Array(values);
  return woodruff(values.length, p, (share) => quantileInPlace(scratch, 0, scratch.length, share));
}

/** The same of counted reaches, metres. */
export function reachEstimateOf(reaches: CodeHistogram, count: number, p: number): Estimate {
  return woodruff(count, p, (share) => histogramQuantile(reaches, count, share, reachOfCode));
}

function woodruff(count: number, p: number, at: (share: number) => number): Estimate {
  if (count === 0) return NOTHING;
  const { low, high } = wilsonInterval(p, count);
  return { value: at(p), low: at(low), high: at(high) };
}
