import type { DayByJunction } from "./day-by-junction";
import { isSpillKnown } from "./leg-level";
import { STEPS_PER_S } from "./stored-figures";

/** Place of observed above spilled time: both below 2^26 steps in a day, and both in a number below 2^53. */
const OBSERVED = 2 ** 26;

/** Adds (sign 1) or takes away (-1) observed and spilled time of entries `from` to `to` by number of the leg. O(to - from). */
export function addSeconds({ ofLeg, spilled, observed }: DayByJunction, from: number, to: number, seconds: Float64Array, sign: 1 | -1): void {
  for (let k = from; k < to; k++) {
    const seen = observed[k];
    const full = spilled[k];
    if (isSpillKnown(seen, full)) seconds[ofLeg[k]] += sign * ((seen - 1) * OBSERVED + (full - 1));
  }
}

/** Seconds out of what was added up for one leg. */
export function observedS(both: number): number {
  return Math.floor(both / OBSERVED) / STEPS_PER_S;
}

export function spilledS(both: number): number {
  return (both - Math.floor(both / OBSERVED) * OBSERVED) / STEPS_PER_S;
}
