const CODES = 65_536;
/** Codes of one coarse bin; 64 of them are a second of delay. */
const BIN_SHIFT = 6;
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

export function createHistogram(): CodeHistogram {
  return { fine: new Uint32Array(CODES), coarse: new Uint32Array(CODES / BIN) };
}

/** O(bins in use). */
export function emptyHistogram({ fine, coarse }: CodeHistogram): void {
  for (let bin = 0; bin < coarse.length; bin++) {
    if (coarse[bin] === 0) continue;
    coarse[bin] = 0;
    fine.fill(0, bin * BIN, (bin + 1) * BIN);
  }
}

export function countCodes({ fine, coarse }: CodeHistogram, codes: Uint16Array, from: number, to: number): void {
  for (let i = from; i < to; i++) {
    fine[codes[i]] += 1;
    coarse[codes[i] >> BIN_SHIFT] += 1;
  }
}

/** Counts codes `from` to `to` except zeros, which stand for "unknown"; returns how many there were. */
export function countKnown({ fine, coarse }: CodeHistogram, codes: Uint16Array, from: number, to: number): number {
  let known = 0;
  for (let i = from; i < to; i++) {
    const code = codes[i];
    if (code === 0) continue;
    fine[code] += 1;
    coarse[code >> BIN_SHIFT] += 1;
    known += 1;
  }
  return known;
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
