/** Webster, Road Research Technical Paper 39 (1958). Seconds a vehicle. */

/** Mean delay, full form with its empirical third term; flow in vehicles a second, x < 1. */
export function websterDelayS(cycleS: number, greenS: number, x: number, flowVps: number): number {
  const ratio = greenS / cycleS;
  const correction = 0.65 * Math.cbrt(cycleS / flowVps ** 2) * x ** (2 + 5 * ratio);
  return twoTerms(cycleS, ratio, x, flowVps) - correction;
}

/** Mean delay, short form: nine tenths of the first two terms. */
export function websterShortDelayS(cycleS: number, greenS: number, x: number, flowVps: number): number {
  return 0.9 * twoTerms(cycleS, greenS / cycleS, x, flowVps);
}

/** Cycle of least delay, from the lost time and the sum of the critical flow ratios (< 1). */
export function websterCycleS(lostS: number, flowRatios: number): number {
  return (1.5 * lostS + 5) / (1 - flowRatios);
}

/** Share of vehicles that stop under uniform arrivals. */
export function uniformStopShare(greenRatio: number, x: number): number {
  return (1 - greenRatio) / (1 - greenRatio * x);
}

function twoTerms(cycleS: number, ratio: number, x: number, flowVps: number): number {
  if (!(x < 1)) throw new RangeError(`Webster's delay needs a degree of saturation below 1, got ${x}.`);
  return (cycleS * (1 - ratio) ** 2) / (2 * (1 - ratio * x)) + x ** 2 / (2 * flowVps * (1 - x));
}
