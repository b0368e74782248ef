/**
 * Figures of a slice are kept as whole numbers of two bytes: small, and their sums are the same in any order.
 *
 * Delay: steps of 1/64 s from -64 s up to 704 s, of 1/4 s from there up to 4,799 s; rounded to the nearest, values
 * outside count as the nearest end. Hence at most 1/128 s of error below 704 s, and 1/8 s above.
 * Reach: steps of 1/8 m up to 8,191 m. Spilled and observed time: steps of 1/32 s up to 2,047 s.
 */
export const TICKS_PER_S = 64;
/** Code of a delay of 0 s. */
export const ZERO_DELAY = 64 * TICKS_PER_S;
/** The first code of the coarser steps. */
export const COARSE_FROM = 49_152;
const COARSE_SHIFT = 4;
const MOST = 65_535;

/** Steps in a metre and in a second; 0 stands for "the sample cannot say", so that what is known is always larger. */
const STEPS_PER_M = 8;
export const STEPS_PER_S = 32;

export function delayCode(delayS: number): number {
  if (Number.isNaN(delayS)) throw new RangeError("A traversal without a delay cannot be kept.");
  const ticks = Math.round(delayS * TICKS_PER_S) + ZERO_DELAY;
  const code = ticks < COARSE_FROM ? ticks : COARSE_FROM + Math.round((ticks - COARSE_FROM) / 2 ** COARSE_SHIFT);
  return Math.min(MOST, Math.max(0, code));
}

/** Whole ticks of 1/64 s, counted from the smallest delay: `ZERO_DELAY` of them are no delay. */
export function delayTicks(code: number): number {
  return code < COARSE_FROM ? code : COARSE_FROM + ((code - COARSE_FROM) << COARSE_SHIFT);
}

export function delayOfCode(code: number): number {
  return (delayTicks(code) - ZERO_DELAY) / TICKS_PER_S;
}

export function reachCode(reachM: number): number {
  return codeOf(reachM * STEPS_PER_M);
}

/** Metres; NaN where the sample cannot say. */
export function reachOfCode(code: number): number {
  return code === 0 ? NaN : (code - 1) / STEPS_PER_M;
}

export function secondsCode(seconds: number): number {
  return codeOf(seconds * STEPS_PER_S);
}

/** Seconds; NaN where the sample cannot say. */
export function secondsOfCode(code: number): number {
  return code === 0 ? NaN : (code - 1) / STEPS_PER_S;
}

function codeOf(steps: number): number {
  return Number.isNaN(steps) ? 0 : 1 + Math.min(MOST - 1, Math.max(0, Math.round(steps)));
}
