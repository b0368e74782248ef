/** Arithmetic mean; NaN of nothing. O(n). */
export function mean(values: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i];
  return values.length === 0 ? NaN : sum / values.length;
}
