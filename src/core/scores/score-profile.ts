import type { Estimate } from "@/core/types";
import { createLevel, figuresOf, type DelayLevel } from "./delay-level";
import { addLegQuarter, createReachLevel, reachQuantiles, spillEstimate } from "./leg-level";
import { addToTally, clustersFor, closeDay } from "./ratio-tally";
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

/** Day profile of some movements and legs: always 96 quarters. O(cells of the days). */
export function scoreProfile(days: readonly ScreenDay[], of: ProfileOf): ProfileQuarter[] {
  const movements = new Set(of.movements);
  const legs = new Set(of.legs);
  const clusters = clustersFor(days.length);
  const level = createLevel(QUARTERS, clusters);
  const queues = createReachLevel(QUARTERS, clusters);
  for (const day of [...days].sort((a, b) => a.day - b.day)) {
    for (let c = 0; c < day.cells; c++) if (movements.has(day.movement[c])) addCell(level, day, c);
    for (let k = 0; k < day.legQuarters; k++) if (legs.has(day.leg[k])) addLegQuarter(queues, day.legQuarter[k], day, k);
    for (const tally of [level.delay, queues.spill]) closeDay(tally);
  }
  const figures = figuresOf(level, new Uint8Array(QUARTERS));
  return Array.from({ length: QUARTERS }, (_, quarter) => ({
    quarter,
    vehicles: figures.vehicles(quarter),
    days: figures.days(quarter),
    delay: figures.delay(quarter),
    reachP95M: reachQuantiles(queues.reachM[quarter]).reachP95M,
    spill: spillEstimate(queues, quarter),
  }));
}

function addCell(level: DelayLevel, day: ScreenDay, cell: number): void {
  const quarter = day.quarter[cell];
  for (let i = day.offset[cell]; i < day.offset[cell + 1]; i++) {
    const delayS = day.delayS[i];
    addToTally(level.delay, quarter, 1, delayS);
    level.sumSq[quarter] += delayS * delayS;
    level.stops[quarter] += day.stops[i];
    if (day.stops[i] > 0) level.stopped[quarter] += 1;
  }
}
