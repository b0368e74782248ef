/**
 * Quantile of a small sorted sample at the rank p(n + 1), linear between ranks and held at the ends
 * (Hyndman and Fan, Sample Quantiles in Statistical Packages, 1996, type 6). NaN for an empty sample.
 */
export function quantileWithin(sorted: ArrayLike<number>, p: number): number {
  const n = sorted.length;
  if (n === 0) return NaN;
  const rank = p * (n + 1);
  if (rank <= 1) return sorted[0];
  if (rank >= n) return sorted[n - 1];
  const below = Math.floor(rank);
  return sorted[below - 1] + (rank - below) * (sorted[below] - sorted[below - 1]);
}
