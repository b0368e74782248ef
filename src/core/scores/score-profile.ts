import type { Estimate } from "@/core/types";
import { countKnown, createHistogram, emptyHistogram, histogramQuantile, type CodeHistogram } from "./code-histogram";
import { createLevel, figuresOf, type DelayLevel } from "./delay-level";
import { addSpill, spillEstimate } from "./leg-level";
import { addToTally, clustersFor, closeDay, createTally, type RatioTally } from "./ratio-tally";
import { entryAt, rowOfKey } from "./rows-of-day";
import { reachOfCode } from "./stored-figures";
import { emptySums, sumStretch } from "./sum-stretch";
import type { ScreenDay } from "./types";

const QUARTERS = 96;

/** One quarter of the local day. */
export interface ProfileQuarter {
  /** 0 to 95. */
  quarter: number;
  vehicles: number;
  days: number;
  delay: Estimate;
  /** 95th percentile over days and legs; NaN where nothing was seen. */
  reachP95M: number;
  spill: Estimate;
}

/** What a profile is of, by the caller's keys: delays of movements, queues of legs. */
export interface ProfileOf {
  movements: readonly number[];
  legs: readonly number[];
}

/** Day profile of some movements and legs: always 96 quarters. O(days × movements + their traversals). */
export function scoreProfile(days: readonly ScreenDay[], of: ProfileOf): ProfileQuarter[] {
  const clusters = clustersFor(days.length);
  const level = createLevel(QUARTERS, clusters);
  const spill = createTally(QUARTERS, clusters);
  const codes = createHistogram();
  for (const day of [...days].sort((a, b) => a.day - b.day)) {
    for (const key of of.movements) addMovement(level, day, rowOfKey(day.movement, key), codes);
    for (const key of of.legs) addLeg(spill, day, rowOfKey(day.leg, key));
    for (const tally of [level.delay, spill]) closeDay(tally);
  }
  const figures = figuresOf(level, new Uint8Array(QUARTERS));
  return Array.from({ length: QUARTERS }, (_, quarter) => ({
    quarter,
    vehicles: figures.vehicles(quarter),
    days: figures.days(quarter),
    delay: figures.delay(quarter),
    reachP95M: reachP95Of(days, of.legs, quarter, codes),
    spill: spillEstimate(spill, quarter),
  }));
}

function addMovement(level: DelayLevel, day: ScreenDay, row: number, codes: CodeHistogram): void {
  if (row < 0) return;
  const sums = emptySums();
  for (let from = day.movementStart[row]; from < day.movementStart[row + 1]; ) {
    const quarter = day.quarter[from];
    const to = entryAt(day.quarter, from, day.movementStart[row + 1], quarter + 1);
    sumStretch(day, from, to, codes, sums);
    addToTally(level.delay, quarter, sums.vehicles, sums.delayS);
    level.sumSq[quarter] += sums.delaySq;
    level.stops[quarter] += sums.stops;
    level.stopped[quarter] += sums.stopped;
    from = to;
  }
}

function addLeg(spill: RatioTally, day: ScreenDay, row: number): void {
  if (row < 0) return;
  for (let k = day.legStart[row]; k < day.legStart[row + 1]; k++) addSpill(spill, day.legQuarter[k], day, k, k + 1);
}

function reachP95Of(days: readonly ScreenDay[], legs: readonly number[], quarter: number, codes: CodeHistogram): number {
  emptyHistogram(codes);
  let known = 0;
  for (const day of days) {
    for (const key of legs) {
      const row = rowOfKey(day.leg, key);
      if (row < 0) continue;
      const from = entryAt(day.legQuarter, day.legStart[row], day.legStart[row + 1], quarter);
      known += countKnown(codes, day.reach, from, entryAt(day.legQuarter, from, day.legStart[row + 1], quarter + 1));
    }
  }
  return histogramQuantile(codes, known, 0.95, reachOfCode);
}
