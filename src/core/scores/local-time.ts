/** Offset of the city's clock from UTC from a moment on. Tables are sorted by `fromMs`; the first row also holds before it. */
export interface LocalOffset {
  fromMs: number;
  offsetMin: number;
}

export interface LocalQuarter {
  /** Days since 1970-01-01 of the local calendar day. */
  day: number;
  /** Quarter of the hour of that day by the clock on the wall, 0 to 95. */
  quarter: number;
}

const DAY_MS = 86_400_000;
const QUARTERS = 96;

/** Local day and quarter of a moment. The hour that the autumn change repeats falls into the same quarters twice. O(log rows). */
export function localQuarter(tMs: number, table: readonly LocalOffset[]): LocalQuarter {
  if (table.length === 0) throw new RangeError("The table of UTC offsets is empty.");
  let low = 0;
  let high = table.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (table[middle].fromMs <= tMs) low = middle;
    else high = middle - 1;
  }
  const localMs = tMs + table[low].offsetMin * 60_000;
  const day = Math.floor(localMs / DAY_MS);
  return { day, quarter: Math.floor(((localMs - day * DAY_MS) / DAY_MS) * QUARTERS) };
}
