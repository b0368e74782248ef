export const CODES = 65_536;
/** A coarse bin holds as many codes as there are such bins: a walk to a code is as short as it can be. */
const BIN_SHIFT = 8;
const BIN = 2 ** BIN_SHIFT;

/**
 * Counts of two-byte codes, from which their order statistics are read exactly. Made once and emptied for each unit;
 * the loop that fills it adds to both arrays by itself: `fine[code] += 1` and `coarse[code >> COARSE_SHIFT] += 1`.
 */
export interface CodeHistogram {
  fine: Uint32Array;
  coarse: Uint32Array;
}

export const COARSE_SHIFT = BIN_SHIFT;

/** One or, one behind the other in the same arrays, several of them. */
export function createHistogram(count = 1): CodeHistogram {
  return { fine: new Uint32Array(count * CODES), coarse: new Uint32Array((count * CODES) / BIN) };
}

/** One of several. */
export function histogramOf({ fine, coarse }: CodeHistogram, slot: number): CodeHistogram {
  return { fine: fine.subarray(slot * CODES, (slot + 1) * CODES), coarse: coarse.subarray((slot * CODES) / BIN, ((slot + 1) * CODES) / BIN) };
}

/** How many codes it holds. O(bins). */
export function countOf({ coarse }: CodeHistogram): number {
  let count = 0;
  for (let bin = 0; bin < coarse.length; bin++) count += coarse[bin];
  return count;
}

/** O(bins in use). */
export function emptyHistogram({ fine, coarse }: CodeHistogram): void {
  for (let bin = 0; bin < coarse.length; bin++) {
    if (coarse[bin] === 0) continue;
    coarse[bin] = 0;
    fine.fill(0, bin * BIN, (bin + 1) * BIN);
  }
}

/** Makes the coarse bins up to that of the code anew, where a loop has filled the fine ones alone. O(code). */
export function coarsen({ fine, coarse }: CodeHistogram, mostCode: number): void {
  for (let bin = 0; bin <= mostCode >> BIN_SHIFT; bin++) {
    let sum = 0;
    for (let code = bin * BIN; code < (bin + 1) * BIN; code++) sum += fine[code];
    coarse[bin] = sum;
  }
}

/** Returns 1: what it adds to a count. */
export function addCode({ fine, coarse }: CodeHistogram, code: number): number {
  fine[code] += 1;
  coarse[code >> BIN_SHIFT] += 1;
  return 1;
}

/**
 * Type 7 quantile (Hyndman and Fan 1996) of the `count` codes in the histogram, each read as `valueOf` says, which must
 * ascend. NaN when there are none. O(bins).
 */
export function histogramQuantile(histogram: CodeHistogram, count: number, p: number, valueOf: (code: number) => number): number {
  if (count === 0) return NaN;
  const position = (count - 1) * p;
  const lower = Math.floor(position);
  const low = codeAt(histogram, lower);
  const high = lower === count - 1 ? low : codeAt(histogram, lower + 1);
  return valueOf(low) + (valueOf(high) - valueOf(low)) * (position - lower);
}

/** The code of that rank, 0 for the smallest. */
function codeAt({ fine, coarse }: CodeHistogram, rank: number): number {
  let bin = 0;
  let below = 0;
  while (below + coarse[bin] <= rank) below += coarse[bin++];
  let code = bin * BIN;
  while (below + fine[code] <= rank) below += fine[code++];
  return code;
}
