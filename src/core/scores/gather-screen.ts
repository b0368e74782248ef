import { TURNS } from "@/core/types";
import type { CatalogueIndex } from "./catalogue-index";
import { addCell, createLevel, sumCell, type DelayLevel } from "./delay-level";
import { addLegQuarter, createReachLevel, type ReachLevel } from "./leg-level";
import { closeDay, closeQuarter } from "./ratio-tally";
import type { ScoreFilter, ScreenDay } from "./types";

/** All that one screen adds up, by the dense numbers of the catalogue index. */
export interface GatheredScreen {
  movements: DelayLevel;
  legs: DelayLevel;
  junctions: DelayLevel;
  queues: ReachLevel;
  /** Traversals of movement u: entries offset[u] to offset[u + 1]; those of a junction follow each other. Scratch. */
  offset: Uint32Array;
  delayS: Float32Array;
  /** Distinct vehicles among entries from..to. */
  distinct(from: number, to: number): number;
}

/** Two passes over the cells of the window: sums and counts, then places. O(traversals). */
export function gatherScreen(days: readonly ScreenDay[], index: CatalogueIndex, filter: ScoreFilter): GatheredScreen {
  checkFilter(filter);
  const ordered = [...days].sort((a, b) => a.day - b.day);
  const movements = createLevel(index.movements.length);
  const legs = createLevel(index.legs.length);
  const junctions = createLevel(index.junctions.length);
  const queues = createReachLevel(index.legs.length);
  const offset = new Uint32Array(index.movements.length + 1);
  for (const day of ordered) {
    eachCell(day, index, filter, (u, cell, isNewQuarter) => {
      if (isNewQuarter) for (const level of [movements, legs, junctions]) closeQuarter(level.delay);
      const sums = sumCell(day, cell);
      addCell(movements, u, sums);
      addCell(legs, index.legOf[u], sums);
      addCell(junctions, index.junctionOf[u], sums);
      offset[u + 1] += sums.n;
    });
    for (const level of [movements, legs, junctions]) closeDay(level.delay);
    gatherLegs(day, index, filter, queues);
  }
  for (let u = 0; u < index.movements.length; u++) offset[u + 1] += offset[u];
  const { delayS, vehicle } = place(ordered, index, filter, offset);
  return { movements, legs, junctions, queues, offset, delayS, distinct: (from, to) => countDistinct(vehicle, from, to) };
}

function checkFilter({ fromQuarter, toQuarter }: ScoreFilter): void {
  if (!(fromQuarter >= 0 && fromQuarter < toQuarter && toQuarter <= 96)) {
    throw new RangeError(`The window must lie in quarters 0..96 and end after it begins, got ${fromQuarter} to ${toQuarter}.`);
  }
}

type CellVisitor = (unit: number, cell: number, isNewQuarter: boolean) => void;

/** Cells of the window and turn, in order of quarter; movements that the catalogue lacks are passed over. */
function eachCell(day: ScreenDay, index: CatalogueIndex, filter: ScoreFilter, visit: CellVisitor): void {
  const turn = filter.turn === null ? -1 : TURNS.indexOf(filter.turn);
  let lastQuarter = -1;
  for (let c = firstAt(day.quarter, filter.fromQuarter); c < day.cells && day.quarter[c] < filter.toQuarter; c++) {
    const unit = index.movementByKey.get(day.movement[c]);
    if (unit === undefined || (turn >= 0 && index.turnOf[unit] !== turn)) continue;
    visit(unit, c, day.quarter[c] !== lastQuarter);
    lastQuarter = day.quarter[c];
  }
}

function gatherLegs(day: ScreenDay, index: CatalogueIndex, filter: ScoreFilter, queues: ReachLevel): void {
  let lastQuarter = -1;
  for (let k = firstAt(day.legQuarter, filter.fromQuarter); k < day.legQuarters && day.legQuarter[k] < filter.toQuarter; k++) {
    const unit = index.legByKey.get(day.leg[k]);
    if (unit === undefined) continue;
    if (day.legQuarter[k] !== lastQuarter) closeQuarter(queues.spill);
    lastQuarter = day.legQuarter[k];
    addLegQuarter(queues, unit, {
      reachM: day.reachM[k],
      reachEstimateM: day.reachEstimateM[k],
      spilledS: day.spilledS[k],
      observedS: day.observedS[k],
    });
  }
  closeDay(queues.spill);
}

function place(days: readonly ScreenDay[], index: CatalogueIndex, filter: ScoreFilter, offset: Uint32Array): { delayS: Float32Array; vehicle: Uint32Array } {
  const total = offset[index.movements.length];
  const next = offset.slice();
  const delayS = new Float32Array(total);
  const vehicle = new Uint32Array(total);
  for (const day of days) {
    eachCell(day, index, filter, (u, cell) => {
      const from = day.offset[cell];
      const to = day.offset[cell + 1];
      delayS.set(day.delayS.subarray(from, to), next[u]);
      vehicle.set(day.vehicle.subarray(from, to), next[u]);
      next[u] += to - from;
    });
  }
  return { delayS, vehicle };
}

function countDistinct(vehicle: Uint32Array, from: number, to: number): number {
  const sorted = vehicle.slice(from, to).sort();
  let count = 0;
  for (let i = 0; i < sorted.length; i++) if (i === 0 || sorted[i] !== sorted[i - 1]) count++;
  return count;
}

/** First index whose value is at least `least`; the column ascends. */
function firstAt(column: Uint8Array, least: number): number {
  let low = 0;
  let high = column.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (column[middle] < least) low = middle + 1;
    else high = middle;
  }
  return low;
}
