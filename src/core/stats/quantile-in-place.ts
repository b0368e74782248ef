/**
 * Type 7 quantile of `values[from..to)` by selection, which reorders that stretch: hand in a scratch copy.
 * NaN when the stretch is empty. O(n) on average; NaN among the values is the caller's mistake.
 */
export function quantileInPlace(values: Float32Array, from: number, to: number, p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`Quantile must lie in 0..1, got ${p}.`);
  const last = to - from - 1;
  if (last < 0) return NaN;
  const position = last * p;
  const lower = Math.floor(position);
  const low = select(values, from, to - 1, from + lower);
  if (lower === last) return low;
  // After the selection everything to the right is at least as large: the next order statistic is its minimum.
  let high = values[from + lower + 1];
  for (let i = from + lower + 2; i < to; i++) if (values[i] < high) high = values[i];
  return low + (high - low) * (position - lower);
}

/** Hoare's selection with the median of three as pivot; puts the k-th smallest at index k. */
function select(values: Float32Array, first: number, last: number, k: number): number {
  let left = first;
  let right = last;
  while (left < right) {
    const pivot = medianOfThree(values[left], values[(left + right) >> 1], values[right]);
    let i = left;
    let j = right;
    while (i <= j) {
      while (values[i] < pivot) i++;
      while (values[j] > pivot) j--;
      if (i <= j) {
        const swap = values[i];
        values[i++] = values[j];
        values[j--] = swap;
      }
    }
    if (k <= j) right = j;
    else if (k >= i) left = i;
    else break;
  }
  return values[k];
}

function medianOfThree(a: number, b: number, c: number): number {
  return Math.max(Math.min(a, b), Math.min(Math.max(a, b), c));
}
