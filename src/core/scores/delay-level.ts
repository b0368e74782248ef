import { wilsonInterval } from "@/core/stats/wilson-interval";
import type { Estimate } from "@/core/types";
import { meanIntervals, type MeanIntervals } from "./mean-intervals";
import { createTally, type Clusters, type RatioTally } from "./ratio-tally";

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

export function createLevel(units: number, clusters: Clusters): DelayLevel {
  const zeros = (): Float64Array => new Float64Array(units);
  return { delay: createTally(units, clusters), sumSq: zeros(), stopped: zeros(), stops: zeros() };
}

/** Adds squares and stops of each unit to the unit that holds it; the tallies are filled cluster by cluster. O(units). */
export function rollUp(from: DelayLevel, unitOf: Uint32Array, to: DelayLevel): void {
  for (let u = 0; u < unitOf.length; u++) {
    to.sumSq[unitOf[u]] += from.sumSq[u];
    to.stopped[unitOf[u]] += from.stopped[u];
    to.stops[unitOf[u]] += from.stops[u];
  }
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
