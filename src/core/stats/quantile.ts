/**
 * Linear-interpolated quantile, type 7 of Hyndman and Fan (1996), of values that are sorted ascending.
 * NaN when there are none, so that an unobserved hour never reads as zero delay. O(1).
 */
export function quantileSorted(sorted: ArrayLike<number>, p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`Quantile must lie in 0..1, got ${p}.`);
  const last = sorted.length - 1;
  if (last < 0) return NaN;
  const position = last * p;
  const lower = Math.floor(position);
  const upper = Math.min(lower + 1, last);
  return sorted[lower] + (sorted[upper] - sorted[lower]) * (position - lower);
}

/** Type 7 quantile of values in any order; the input stays as it is. O(n log n). */
export function quantile(values: ArrayLike<number>, p: number): number {
  return quantileSorted(Float64Array.from(values).sort(), p);
}
