import { TURNS } from "@/core/types";
import type { CatalogueIndex } from "./catalogue-index";
import { createHistogram, countKnown, emptyHistogram, histogramQuantile, type CodeHistogram } from "./code-histogram";
import { createLevel, LEAST_FOR_MEDIAN, LEAST_FOR_P95, type DelayLevel } from "./delay-level";
import { createDistinctSets, type DistinctSets } from "./distinct-sets";
import { ENOUGH_VEHICLES } from "./evidence";
import { addSpill } from "./leg-level";
import { addToTally, closeDayOf, closeQuarterOf, clustersFor, createTally, type Clusters, type RatioTally } from "./ratio-tally";
import { entryAt, rowsOfDay, type RowsOfDay } from "./rows-of-day";
import { delayOfCode, reachOfCode } from "./stored-figures";
import { emptySums, sumStretch, type DelaySums } from "./sum-stretch";
import type { ScoreFilter, ScreenDay } from "./types";

/** All that one screen adds up, by the dense numbers of the catalogue index. */
export interface GatheredScreen {
  movements: DelayLevel;
  legs: DelayLevel;
  junctions: DelayLevel;
  /** Of legs: seconds spilled by seconds observed. */
  spill: RatioTally;
  /** Of legs; NaN where nothing was seen. */
  reachP95M: Float64Array;
  /** Of junctions; NaN where too few were seen. */
  medianS: Float64Array;
  p95S: Float64Array;
  /** Distinct vehicles, counted as far as evidence asks for them. */
  distinct: Record<"movements" | "legs" | "junctions", Uint8Array>;
  traversals: number;
}

interface DayOfScreen {
  slice: ScreenDay;
  rows: RowsOfDay;
}

interface Gathering {
  index: CatalogueIndex;
  days: readonly DayOfScreen[];
  /** Windows of the day, each one cluster: the whole one, or its quarters. */
  windows: readonly { from: number; to: number }[];
  closeCluster(tally: RatioTally, unit: number): void;
  isChosen: Uint8Array;
  out: GatheredScreen;
  /** Scratch. */
  codes: CodeHistogram;
  vehicles: DistinctSets;
  sums: DelaySums;
}

/**
 * One pass over the traversals of the window, junction by junction, so that all that is added up for one stays in the
 * processor's cache. O(days × movements + traversals and leg quarters of the window); a traversal takes 2 to 4 ns.
 */
export function gatherScreen(days: readonly ScreenDay[], index: CatalogueIndex, filter: ScoreFilter): GatheredScreen {
  checkFilter(filter);
  const clusters = clustersFor(days.length);
  const gathering: Gathering = {
    index,
    days: [...days].sort((a, b) => a.day - b.day).map((slice) => ({ slice, rows: rowsOfDay(slice, index) })),
    windows: windowsOf(filter, clusters),
    closeCluster: clusters === "days" ? closeDayOf : closeQuarterOf,
    isChosen: chosenTurns(index, filter),
    out: emptyScreen(index, clusters),
    codes: createHistogram(),
    vehicles: createDistinctSets(mostMovements(index), ENOUGH_VEHICLES),
    sums: emptySums(),
  };
  for (let junction = 0; junction < index.junctions.length; junction++) {
    for (const day of gathering.days) addDay(gathering, day, junction);
    finishJunction(gathering, junction);
  }
  for (let leg = 0; leg < index.legs.length; leg++) addQueues(gathering, leg);
  return gathering.out;
}

function checkFilter({ fromQuarter, toQuarter }: ScoreFilter): void {
  if (!(fromQuarter >= 0 && fromQuarter < toQuarter && toQuarter <= 96)) {
    throw new RangeError(`The window must lie in quarters 0..96 and end after it begins, got ${fromQuarter} to ${toQuarter}.`);
  }
}

function windowsOf({ fromQuarter, toQuarter }: ScoreFilter, clusters: Clusters): Gathering["windows"] {
  if (clusters === "days") return [{ from: fromQuarter, to: toQuarter }];
  return Array.from({ length: toQuarter - fromQuarter }, (_, k) => ({ from: fromQuarter + k, to: fromQuarter + k + 1 }));
}

/** 1 for the movements of the chosen turn. */
function chosenTurns(index: CatalogueIndex, { turn }: ScoreFilter): Uint8Array {
  const wanted = turn === null ? -1 : TURNS.indexOf(turn);
  return index.turnOf.map((own) => (wanted < 0 || own === wanted ? 1 : 0));
}

function emptyScreen(index: CatalogueIndex, clusters: Clusters): GatheredScreen {
  const units = { movements: index.movements.length, legs: index.legs.length, junctions: index.junctions.length };
  return {
    movements: createLevel(units.movements, clusters),
    legs: createLevel(units.legs, clusters),
    junctions: createLevel(units.junctions, clusters),
    spill: createTally(units.legs, clusters),
    reachP95M: new Float64Array(units.legs),
    medianS: new Float64Array(units.junctions).fill(NaN),
    p95S: new Float64Array(units.junctions).fill(NaN),
    distinct: { movements: new Uint8Array(units.movements), legs: new Uint8Array(units.legs), junctions: new Uint8Array(units.junctions) },
    traversals: 0,
  };
}

function mostMovements({ junctionOffset }: CatalogueIndex): number {
  return junctionOffset.reduce((most, offset, j) => Math.max(most, j === 0 ? 0 : offset - junctionOffset[j - 1]), 0);
}

function addDay(gathering: Gathering, { slice, rows }: DayOfScreen, junction: number): void {
  const { index, out, windows } = gathering;
  for (const window of windows) {
    let [vehicles, delayS] = [0, 0];
    for (let leg = index.junctionLegOffset[junction]; leg < index.junctionLegOffset[junction + 1]; leg++) {
      let [ofLeg, ofLegS] = [0, 0];
      for (let u = index.legOffset[leg]; u < index.legOffset[leg + 1]; u++) {
        const row = rows.movement[u];
        if (row < 0 || gathering.isChosen[u] === 0) continue;
        const from = entryAt(slice.quarter, slice.movementStart[row], slice.movementStart[row + 1], window.from);
        const to = entryAt(slice.quarter, from, slice.movementStart[row + 1], window.to);
        if (from === to) continue;
        addStretch(gathering, slice, from, to, u, junction);
        ofLeg += to - from;
        ofLegS += gathering.sums.delayS;
      }
      closeWith(gathering, out.legs.delay, leg, ofLeg, ofLegS);
      vehicles += ofLeg;
      delayS += ofLegS;
    }
    closeWith(gathering, out.junctions.delay, junction, vehicles, delayS);
  }
  if (out.junctions.delay.clusters === "quarters") closeUnits(gathering, junction);
}

/** Adds traversals of one movement on one day to all that holds them, but for the clusters of leg and junction. */
function addStretch(gathering: Gathering, slice: ScreenDay, from: number, to: number, u: number, junction: number): void {
  const { index, out, codes, vehicles, sums } = gathering;
  sumStretch(slice, from, to, codes, sums);
  vehicles.add(u - index.junctionOffset[junction], slice.vehicle, from, to);
  closeWith(gathering, out.movements.delay, u, sums.vehicles, sums.delayS);
  addToLevel(out.movements, u, sums);
  addToLevel(out.legs, index.legOf[u], sums);
  addToLevel(out.junctions, junction, sums);
}

function addToLevel(level: DelayLevel, unit: number, sums: DelaySums): void {
  level.sumSq[unit] += sums.delaySq;
  level.stopped[unit] += sums.stopped;
  level.stops[unit] += sums.stops;
}

function closeWith({ closeCluster }: Gathering, tally: RatioTally, unit: number, base: number, total: number): void {
  if (base === 0) return;
  addToTally(tally, unit, base, total);
  closeCluster(tally, unit);
}

/** The day is over for a junction and all that belongs to it. */
function closeUnits({ index, out }: Gathering, junction: number): void {
  for (let u = index.junctionOffset[junction]; u < index.junctionOffset[junction + 1]; u++) closeDayOf(out.movements.delay, u);
  for (let leg = index.junctionLegOffset[junction]; leg < index.junctionLegOffset[junction + 1]; leg++) closeDayOf(out.legs.delay, leg);
  closeDayOf(out.junctions.delay, junction);
}

function finishJunction({ index, out, codes, vehicles }: Gathering, junction: number): void {
  const first = index.junctionOffset[junction];
  const count = out.junctions.delay.base[junction];
  if (count >= LEAST_FOR_MEDIAN) out.medianS[junction] = histogramQuantile(codes, count, 0.5, delayOfCode);
  if (count >= LEAST_FOR_P95) out.p95S[junction] = histogramQuantile(codes, count, 0.95, delayOfCode);
  for (let u = first; u < index.junctionOffset[junction + 1]; u++) out.distinct.movements[u] = vehicles.count(u - first, u - first + 1);
  for (let leg = index.junctionLegOffset[junction]; leg < index.junctionLegOffset[junction + 1]; leg++) {
    out.distinct.legs[leg] = vehicles.count(index.legOffset[leg] - first, index.legOffset[leg + 1] - first);
  }
  out.distinct.junctions[junction] = vehicles.count(0, index.junctionOffset[junction + 1] - first);
  out.traversals += count;
  emptyHistogram(codes);
  vehicles.clear();
}

function addQueues({ days, windows, out, codes, closeCluster }: Gathering, leg: number): void {
  let known = 0;
  for (const { slice, rows } of days) {
    const row = rows.leg[leg];
    if (row < 0) continue;
    const end = slice.legStart[row + 1];
    let to = entryAt(slice.legQuarter, slice.legStart[row], end, windows[0].from);
    for (const window of windows) {
      const from = to;
      to = entryAt(slice.legQuarter, from, end, window.to);
      known += countKnown(codes, slice.reach, from, to);
      addSpill(out.spill, leg, slice, from, to);
      closeCluster(out.spill, leg);
    }
    closeDayOf(out.spill, leg);
  }
  out.reachP95M[leg] = histogramQuantile(codes, known, 0.95, reachOfCode);
  emptyHistogram(codes);
}
