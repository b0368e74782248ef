/** Competition ranks, 1 for the largest; equal values share the better rank. O(n log n). */
export function competitionRanks(values: ArrayLike<number>): Float64Array {
  const sorted = Float64Array.from(values).sort();
  const ranks = new Float64Array(values.length);
  for (let i = 0; i < values.length; i++) ranks[i] = 1 + countAbove(sorted, values[i]);
  return ranks;
}

/** How many of the ascending values are strictly greater than x. O(log n). */
function countAbove(sorted: Float64Array, x: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] > x) high = middle;
    else low = middle + 1;
  }
  return sorted.length - low;
}
