import { quantileInPlace } from "@/core/stats/quantile-in-place";
import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import { clusterVariance } from "./cluster-variance";
import { histogramQuantile, type CodeHistogram } from "./code-histogram";
import { addToTally, type RatioTally } from "./ratio-tally";
import { reachOfCode, STEPS_PER_S } from "./stored-figures";
import type { ScreenDay } from "./types";

const QUARTER_S = 900;
const NOTHING: Estimate = Object.freeze({ value: NaN, low: NaN, high: NaN });

/** Adds the observed and spilled time of entries `from` to `to`; what is missing in one is left out. */
export function addSpill(tally: RatioTally, unit: number, { spilled, observed }: ScreenDay, from: number, to: number): void {
  let [seen, full] = [0, 0];
  for (let k = from; k < to; k++) {
    // Code 0 is unknown and code 1 is none.
    if (observed[k] < 2 || spilled[k] === 0) continue;
    seen += observed[k] - 1;
    full += spilled[k] - 1;
  }
  if (seen > 0) addToTally(tally, unit, seen / STEPS_PER_S, full / STEPS_PER_S);
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
