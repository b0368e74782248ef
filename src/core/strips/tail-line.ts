import { quantileEstimate } from "@/core/scores/leg-level";
import type { DayReaches } from "./reach-of-days";

/** Tail line over the columns of a strip; NaN where the days cannot say. */
export interface TailLine {
  fromS: number;
  columnS: number;
  columns: number;
  /** Days (within the pooling span) that saw the leg in or near the column. */
  samples: Uint16Array;
  reachM: Float32Array;
  /** 95 % interval; NaN for a single day. */
  lowM: Float32Array;
  highM: Float32Array;
}

/** Columns on either side that lend their samples are at most this far away. */
const POOL_S = 450;
/** Enough samples for a 95th percentile that is not simply the largest. */
const ENOUGH = 21;
const TAIL_QUANTILE = 0.95;

/**
 * Tail line of pooled days: for every column the 95th percentile (type 7) over days of the farthest reach
 * that each day showed in it. Where few days saw the column, neighbours up to 7.5 minutes away are pooled,
 * nearest first, until 21 samples are found; a column that no day saw stays NaN. Its interval is that of the scores (Woodruff 1952); its upper end
 * is at most the largest reach seen. A single day shows its own reach, without an interval. O(days × steps + columns × samples × log).
 */
export function tailLine(reaches: Omit<DayReaches, "tailM" | "leastTailM">, columnS: number): TailLine {
  const columns = Math.max(1, Math.ceil((reaches.steps * reaches.stepS) / columnS));
  const perDay = farthestByColumn(reaches, columnS, columns);
  const line: TailLine = {
    fromS: reaches.fromS,
    columnS,
    columns,
    samples: new Uint16Array(columns),
    reachM: new Float32Array(columns).fill(NaN),
    lowM: new Float32Array(columns).fill(NaN),
    highM: new Float32Array(columns).fill(NaN),
  };
  const isSingle = reaches.days.length === 1;
  const neighbours = isSingle ? 0 : Math.floor(POOL_S / columnS);
  for (let column = 0; column < columns; column++) {
    const found = pooled(perDay, columns, reaches.days.length, column, neighbours);
    const { value, low, high } = quantileEstimate(found, TAIL_QUANTILE);
    line.samples[column] = found.length;
    line.reachM[column] = value;
    if (isSingle) continue;
    line.lowM[column] = low;
    line.highM[column] = high;
  }
  return line;
}

/** Farthest reach of each day in each column; entry = day * columns + column. */
function farthestByColumn(reaches: Omit<DayReaches, "tailM" | "leastTailM">, columnS: number, columns: number): Float32Array {
  const out = new Float32Array(reaches.days.length * columns).fill(NaN);
  for (let day = 0; day < reaches.days.length; day++) {
    for (let step = 0; step < reaches.steps; step++) {
      const reach = reaches.reachM[day * reaches.steps + step];
      const at = day * columns + Math.floor(((step + 0.5) * reaches.stepS) / columnS);
      if (reach >= 0 && !(out[at] >= reach)) out[at] = reach;
    }
  }
  return out;
}

/** Samples of a column; nearest neighbours join on both sides while there are too few. */
function pooled(perDay: Float32Array, columns: number, days: number, column: number, neighbours: number): number[] {
  const found: number[] = [];
  for (let distance = 0; distance <= neighbours; distance++) {
    // A column that no day saw stays empty: its neighbours must not speak for it.
    if (distance === 1 && found.length === 0) break;
    for (const at of distance === 0 ? [column] : [column - distance, column + distance]) {
      if (at < 0 || at >= columns) continue;
      for (let day = 0; day < days; day++) {
        const reach = perDay[day * columns + at];
        if (reach >= 0) found.push(reach);
      }
    }
    if (found.length >= ENOUGH) break;
  }
  return found;
}
