import { quantileInPlace } from "@/core/stats/quantile-in-place";
import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import { meanIntervals, type MeanIntervals } from "./mean-intervals";
import { addToTally, createTally, type RatioTally } from "./ratio-tally";
import type { ScreenDay } from "./types";

/** Below this many traversals no median is given, */
export const LEAST_FOR_MEDIAN = 5;
/** and below this many no 95th percentile: the one value above it would decide. */
export const LEAST_FOR_P95 = 20;

/** What is added up for each unit of one level: movements, legs or junctions. */
export interface DelayLevel {
  delay: RatioTally;
  sumSq: Float64Array;
  stopped: Float64Array;
  stops: Float64Array;
}

export function createLevel(units: number): DelayLevel {
  const zeros = (): Float64Array => new Float64Array(units);
  return { delay: createTally(units), sumSq: zeros(), stopped: zeros(), stops: zeros() };
}

/** Sums of the traversals of one cell. */
export interface CellSums {
  n: number;
  delayS: number;
  delaySq: number;
  stopped: number;
  stops: number;
}

export function sumCell(day: ScreenDay, cell: number): CellSums {
  const from = day.offset[cell];
  const to = day.offset[cell + 1];
  const sums: CellSums = { n: to - from, delayS: 0, delaySq: 0, stopped: 0, stops: 0 };
  for (let i = from; i < to; i++) {
    const delayS = day.delayS[i];
    sums.delayS += delayS;
    sums.delaySq += delayS * delayS;
    sums.stops += day.stops[i];
    if (day.stops[i] > 0) sums.stopped += 1;
  }
  return sums;
}

export function addCell(level: DelayLevel, unit: number, cell: CellSums): void {
  addToTally(level.delay, unit, cell.n, cell.delayS);
  level.sumSq[unit] += cell.delaySq;
  level.stopped[unit] += cell.stopped;
  level.stops[unit] += cell.stops;
}

export interface LevelFigures {
  intervals: MeanIntervals;
  vehicles(unit: number): number;
  days(unit: number): number;
  delay(unit: number): Estimate;
  stopShare(unit: number): Estimate;
  stopsPerVehicle(unit: number): number;
}

export function figuresOf(level: DelayLevel, group: ArrayLike<number>): LevelFigures {
  const intervals = meanIntervals(level.delay, level.sumSq, group);
  const vehicles = (u: number): number => level.delay.base[u];
  return {
    intervals,
    vehicles,
    days: (u) => level.delay.days[u],
    delay: (u) => ({ value: intervals.value[u], low: intervals.low[u], high: intervals.high[u] }),
    stopShare: (u) => {
      const value = level.stopped[u] / vehicles(u);
      return { value, ...wilsonInterval(value, intervals.effective[u]) };
    },
    stopsPerVehicle: (u) => level.stops[u] / vehicles(u),
  };
}

/** Median and 95th percentile of a stretch of scratch values, which are reordered; NaN where too few. */
export function delayQuantiles(values: Float32Array, from: number, to: number): { medianS: number; p95S: number } {
  const n = to - from;
  return {
    medianS: n >= LEAST_FOR_MEDIAN ? quantileInPlace(values, from, to, 0.5) : NaN,
    p95S: n >= LEAST_FOR_P95 ? quantileInPlace(values, from, to, 0.95) : NaN,
  };
}
