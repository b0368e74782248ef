import { logGamma } from "./log-gamma";

const TINY = 1e-300;

/**
 * Regularised incomplete beta function I_x(a, b), by Lentz's continued fraction (Abramowitz and Stegun 26.5.8).
 * a, b > 0; x in 0..1. Converges in O(sqrt(max(a, b))) steps.
 */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  // The fraction converges fast only on this side of the mean; the other side by symmetry.
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const logFront = logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x);
  return (Math.exp(logFront) * continuedFraction(x, a, b)) / a;
}

function continuedFraction(x: number, a: number, b: number): number {
  let c = 1;
  let d = 1 / nonZero(1 - ((a + b) * x) / (a + 1));
  let result = d;
  for (let m = 1; m < 10_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / nonZero(1 + even * d);
    c = nonZero(1 + even / c);
    result *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / nonZero(1 + odd * d);
    c = nonZero(1 + odd / c);
    result *= d * c;
    if (Math.abs(d * c - 1) < 1e-14) break;
  }
  return result;
}

function nonZero(value: number): number {
  return Math.abs(value) < TINY ? TINY : value;
}
