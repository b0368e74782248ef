import { quantileSorted } from "../stats/quantile";
import type { DayReaches } from "./reach-of-days";

/** Tail line over the columns of a strip; NaN where the days cannot say. */
export interface TailLine {
  fromS: number;
  columnS: number;
  columns: number;
  /** Days (within the pooling span) that saw the leg in or near the column. */
  samples: Uint16Array;
  reachM: Float32Array;
  /** 95 % interval from the order of the samples; NaN for a single day. */
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
 * nearest first, until 21 samples are found. Its interval comes from the binomial order of the samples;
 * its upper end is at most the largest of them, as far as the sample can say. A single day shows its own
 * reach, without an interval. O(days × steps + columns × samples × log).
 */
export function tailLine(reaches: DayReaches, columnS: number): TailLine {
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
    line.samples[column] = found.length;
    line.reachM[column] = quantileSorted(found, TAIL_QUANTILE);
    if (isSingle || found.length === 0) continue;
    const [low, high] = quantileInterval(found.length, TAIL_QUANTILE);
    line.lowM[column] = found[low];
    line.highM[column] = found[high];
  }
  return line;
}

/**
 * Indices (from 0) of the order statistics that bound the p-quantile of n values with about 95 %, kept inside
 * the sample: np -+ 1.96 sqrt(np(1 - p)), both rounded up (Conover, Practical Nonparametric Statistics, 1999, 3.2).
 */
export function quantileInterval(n: number, p: number): [number, number] {
  const half = 1.959963984540054 * Math.sqrt(n * p * (1 - p));
  const low = Math.ceil(n * p - half) - 1;
  const high = Math.ceil(n * p + half) - 1;
  return [Math.min(n - 1, Math.max(0, low)), Math.min(n - 1, Math.max(0, high))];
}

/** Farthest reach of each day in each column; entry = day * columns + column. */
function farthestByColumn(reaches: DayReaches, columnS: number, columns: number): Float32Array {
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

/** Samples of a column, sorted; nearest neighbours join on both sides while there are too few. */
function pooled(perDay: Float32Array, columns: number, days: number, column: number, neighbours: number): number[] {
  const found: number[] = [];
  for (let distance = 0; distance <= neighbours; distance++) {
    for (const at of distance === 0 ? [column] : [column - distance, column + distance]) {
      if (at < 0 || at >= columns) continue;
      for (let day = 0; day < days; day++) {
        const reach = perDay[day * columns + at];
        if (reach >= 0) found.push(reach);
      }
    }
    if (found.length >= ENOUGH) break;
  }
  return found.sort((a, b) => a - b);
}
