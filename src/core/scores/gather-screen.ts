import { createDistinctCounter } from "@/core/stats/distinct-counter";
import { TURNS } from "@/core/types";
import type { CatalogueIndex } from "./catalogue-index";
import { createLevel, rollUp, type DelayLevel } from "./delay-level";
import { ENOUGH_VEHICLES } from "./evidence";
import { addLegQuarter, createReachLevel, type ReachLevel } from "./leg-level";
import { isListed, prepareDay, type PreparedDay } from "./prepare-day";
import { addOpenTo, clustersFor, closeDay, closeQuarter } from "./ratio-tally";
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
  /** Distinct vehicles among entries from..to, counted as far as evidence asks for them. */
  distinct(from: number, to: number): number;
}

interface DayOfScreen {
  slice: ScreenDay;
  prepared: PreparedDay;
}

/** Two passes over the cells of the window: sums and counts, then places. O(cells + traversals of the window). */
export function gatherScreen(days: readonly ScreenDay[], index: CatalogueIndex, filter: ScoreFilter): GatheredScreen {
  checkFilter(filter);
  const ordered = [...days].sort((a, b) => a.day - b.day).map((slice): DayOfScreen => ({ slice, prepared: prepareDay(slice, index) }));
  const clusters = clustersFor(days.length);
  const movements = createLevel(index.movements.length, clusters);
  const legs = createLevel(index.legs.length, clusters);
  const junctions = createLevel(index.junctions.length, clusters);
  const queues = createReachLevel(index.legs.length, clusters);
  const offset = new Uint32Array(index.movements.length + 1);
  const isChosen = chosenTurns(index, filter);
  for (const day of ordered) {
    for (let quarter = filter.fromQuarter; quarter < filter.toQuarter; quarter++) {
      addCells(day, quarter, isChosen, movements, offset);
      addLegs(day, quarter, queues);
      if (clusters === "quarters") closeCluster(closeQuarter);
    }
    closeCluster(closeDay);
  }
  rollUp(movements, index.legOf, legs);
  rollUp(movements, index.junctionOf, junctions);
  for (let u = 0; u < index.movements.length; u++) offset[u + 1] += offset[u];
  const { delayS, vehicle } = place(ordered, filter, isChosen, offset);
  const counter = createDistinctCounter(longestStretch(index, offset));
  return { movements, legs, junctions, queues, offset, delayS, distinct: (from, to) => counter.count(vehicle, from, to, ENOUGH_VEHICLES) };

  function closeCluster(close: typeof closeDay): void {
    addOpenTo(movements.delay, index.legOf, legs.delay);
    addOpenTo(movements.delay, index.junctionOf, junctions.delay);
    for (const tally of [movements.delay, legs.delay, junctions.delay, queues.spill]) close(tally);
  }
}

function checkFilter({ fromQuarter, toQuarter }: ScoreFilter): void {
  if (!(fromQuarter >= 0 && fromQuarter < toQuarter && toQuarter <= 96)) {
    throw new RangeError(`The window must lie in quarters 0..96 and end after it begins, got ${fromQuarter} to ${toQuarter}.`);
  }
}

/** 1 for the movements of the chosen turn. */
function chosenTurns(index: CatalogueIndex, { turn }: ScoreFilter): Uint8Array {
  const wanted = turn === null ? -1 : TURNS.indexOf(turn);
  return index.turnOf.map((own) => (wanted < 0 || own === wanted ? 1 : 0));
}

function addCells({ slice, prepared }: DayOfScreen, quarter: number, isChosen: Uint8Array, level: DelayLevel, counts: Uint32Array): void {
  const { base, total } = level.delay.open;
  for (let c = prepared.quarterStart[quarter]; c < prepared.quarterStart[quarter + 1]; c++) {
    const u = prepared.unit[c];
    if (!isListed(u) || isChosen[u] === 0) continue;
    const n = slice.offset[c + 1] - slice.offset[c];
    base[u] += n;
    total[u] += prepared.delayS[c];
    level.sumSq[u] += prepared.delaySq[c];
    level.stopped[u] += prepared.stopped[c];
    level.stops[u] += prepared.stops[c];
    counts[u + 1] += n;
  }
}

function addLegs({ slice, prepared }: DayOfScreen, quarter: number, queues: ReachLevel): void {
  for (let k = prepared.legQuarterStart[quarter]; k < prepared.legQuarterStart[quarter + 1]; k++) {
    if (isListed(prepared.legUnit[k])) addLegQuarter(queues, prepared.legUnit[k], slice, k);
  }
}

function place(days: DayOfScreen[], filter: ScoreFilter, isChosen: Uint8Array, offset: Uint32Array): { delayS: Float32Array; vehicle: Uint32Array } {
  const total = offset[offset.length - 1];
  const next = offset.slice();
  const delayS = new Float32Array(total);
  const vehicle = new Uint32Array(total);
  for (const { slice, prepared } of days) {
    const end = prepared.quarterStart[filter.toQuarter];
    for (let c = prepared.quarterStart[filter.fromQuarter]; c < end; c++) {
      const u = prepared.unit[c];
      if (!isListed(u) || isChosen[u] === 0) continue;
      let at = next[u];
      for (let i = slice.offset[c]; i < slice.offset[c + 1]; i++, at++) {
        delayS[at] = slice.delayS[i];
        vehicle[at] = slice.vehicle[i];
      }
      next[u] = at;
    }
  }
  return { delayS, vehicle };
}

function longestStretch(index: CatalogueIndex, offset: Uint32Array): number {
  let longest = 0;
  for (let j = 0; j < index.junctions.length; j++) {
    longest = Math.max(longest, offset[index.junctionOffset[j + 1]] - offset[index.junctionOffset[j]]);
  }
  return longest;
}
