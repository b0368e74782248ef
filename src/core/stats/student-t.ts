import { incompleteBeta } from "./incomplete-beta";

/** Distribution function of Student's t with df > 0 degrees of freedom. */
export function studentTCdf(t: number, df: number): number {
  const tail = 0.5 * incompleteBeta(df / (df + t * t), df / 2, 0.5);
  return t > 0 ? 1 - tail : tail;
}

/**
 * Quantile of Student's t, p in (0, 1), df > 0 (need not be whole), by bisection to about 1e-12 relative.
 * Some 60 evaluations of the incomplete beta function: look common values up with `studentT975`.
 */
export function studentTQuantile(p: number, df: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`Probability must lie inside 0..1, got ${p}.`);
  if (!(df > 0)) throw new RangeError(`Degrees of freedom must be positive, got ${df}.`);
  if (p < 0.5) return -studentTQuantile(1 - p, df);
  let low = 0;
  let high = 2;
  while (studentTCdf(high, df) < p) high *= 2;
  while (high - low > 1e-12 * high) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (studentTCdf(middle, df) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

const TABLE_SIZE = 201;
let table: Float64Array | undefined;

/** 97.5 % point for whole df from a table built on first use; df is rounded down, which errs to the wide side; at least 1. */
export function studentT975(df: number): number {
  if (!table) {
    table = new Float64Array(TABLE_SIZE).fill(NaN);
    for (let d = 1; d < TABLE_SIZE; d++) table[d] = studentTQuantile(0.975, d);
  }
  return table[Math.max(1, Math.min(TABLE_SIZE - 1, Math.floor(df)))];
}
