/** Quarters of an hour in a day. */
export const QUARTERS = 96;
const PLACES = QUARTERS + 1;
const MOST_OF_SHORT = 65_535;

/** Where the entries of each row and quarter begin: by row, and from there on, in two bytes as long as no row has more entries than they can say. */
export interface Starts {
  base: Uint32Array;
  within: Uint16Array | Uint32Array;
}

/** First entry of a row in a quarter; with quarter 96 the end of the row. */
export function startAt({ base, within }: Starts, row: number, quarter: number): number {
  return base[row] + within[row * PLACES + quarter];
}

/** From one list of all starts, 96 for each row and the end at last. */
export function packStarts(all: Uint32Array): Starts {
  const rows = (all.length - 1) / QUARTERS;
  let longest = 0;
  for (let row = 0; row < rows; row++) longest = Math.max(longest, all[(row + 1) * QUARTERS] - all[row * QUARTERS]);
  const base = new Uint32Array(rows);
  const within = longest > MOST_OF_SHORT ? new Uint32Array(rows * PLACES) : new Uint16Array(rows * PLACES);
  for (let row = 0; row < rows; row++) {
    base[row] = all[row * QUARTERS];
    for (let quarter = 0; quarter <= QUARTERS; quarter++) within[row * PLACES + quarter] = all[row * QUARTERS + quarter] - base[row];
  }
  return { base, within };
}
