import type { Estimate } from "@/core/types";
import { addCode, createHistogram, emptyHistogram, histogramQuantile, type CodeHistogram } from "./code-histogram";
import { placeOfLeg, placeOfMovement, type DayByJunction } from "./day-by-junction";
import { createLevel, figuresOf, type DelayLevel } from "./delay-level";
import { addSpill, spillEstimate } from "./leg-level";
import { addToTally, clustersFor, closeDay, createTally, type RatioTally } from "./ratio-tally";
import { QUARTERS, startAt } from "./starts";
import { reachOfCode } from "./stored-figures";
import { createSums, delaySqOf, emptySums, stopsIn, sumEntries, takeDelays } from "./sum-entries";

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

/** Day profile of some movements and legs: always 96 quarters. O(days × (movements + traversals of their junctions)). */
export function scoreProfile(days: readonly DayByJunction[], of: ProfileOf): ProfileQuarter[] {
  const clusters = clustersFor(days.length);
  const level = createLevel(QUARTERS, clusters);
  const spill = createTally(QUARTERS, clusters);
  const codes = createHistogram();
  for (const day of [...days].sort((a, b) => a.day - b.day)) {
    for (const [row, isWanted] of wantedByRow(day, of.movements, placeOfMovement)) addMovements(level, day, row, isWanted, codes);
    for (const [row, isWanted] of wantedByRow(day, of.legs, placeOfLeg)) addLegs(spill, day, row, isWanted);
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

/** For each row that has any of the keys: 1 for their numbers. */
function wantedByRow(day: DayByJunction, keys: readonly number[], placeOf: typeof placeOfLeg): Map<number, Uint8Array> {
  const rows = new Map<number, Uint8Array>();
  for (const key of keys) {
    const place = placeOf(day.index, key);
    if (place === undefined || day.rowOf[place.junction] < 0) continue;
    const isWanted = rows.get(day.rowOf[place.junction]) ?? new Uint8Array(256);
    isWanted[place.number] = 1;
    rows.set(day.rowOf[place.junction], isWanted);
  }
  return rows;
}

function addMovements(level: DelayLevel, day: DayByJunction, row: number, isWanted: Uint8Array, codes: CodeHistogram): void {
  const sums = createSums();
  const taken = { vehicles: 0, delayS: 0 };
  for (let quarter = 0; quarter < QUARTERS; quarter++) {
    const [from, to] = [startAt(day.passedStart, row, quarter), startAt(day.passedStart, row, quarter + 1)];
    if (from === to) continue;
    emptySums(sums);
    sumEntries(day.passed, from, to, isWanted, sums, codes);
    isWanted.forEach((wanted, number) => {
      if (wanted === 0 || sums.delays[number] === 0) return;
      takeDelays(sums, number, taken);
      const { stops, stopped } = stopsIn(sums, number);
      addToTally(level.delay, quarter, taken.vehicles, taken.delayS);
      level.sumSq[quarter] += delaySqOf(sums, number);
      level.stops[quarter] += stops;
      level.stopped[quarter] += stopped;
    });
  }
}

function addLegs(spill: RatioTally, day: DayByJunction, row: number, isWanted: Uint8Array): void {
  for (let quarter = 0; quarter < QUARTERS; quarter++) {
    for (let k = startAt(day.queueStart, row, quarter); k < startAt(day.queueStart, row, quarter + 1); k++) {
      if (isWanted[day.ofLeg[k]] === 1) addSpill(spill, quarter, day.observed[k], day.spilled[k]);
    }
  }
}

function reachP95Of(days: readonly DayByJunction[], legs: readonly number[], quarter: number, codes: CodeHistogram): number {
  emptyHistogram(codes);
  let known = 0;
  for (const day of days) {
    for (const [row, isWanted] of wantedByRow(day, legs, placeOfLeg)) {
      for (let k = startAt(day.queueStart, row, quarter); k < startAt(day.queueStart, row, quarter + 1); k++) {
        if (isWanted[day.ofLeg[k]] === 1 && day.reach[k] > 0) known += addCode(codes, day.reach[k]);
      }
    }
  }
  return histogramQuantile(codes, known, 0.95, reachOfCode);
}
