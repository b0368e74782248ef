import { TURNS } from "@/core/types";
import type { CatalogueIndex } from "./catalogue-index";
import { coarsen, createHistogram, emptyHistogram, histogramQuantile, type CodeHistogram } from "./code-histogram";
import { renumberDay, type DayByJunction } from "./day-by-junction";
import { isMostOf, totalsOf } from "./day-totals";
import { LEAST_FOR_MEDIAN, LEAST_FOR_P95, rollUp } from "./delay-level";
import { createDistinctSets, type DistinctSets } from "./distinct-sets";
import { ENOUGH_VEHICLES } from "./evidence";
import { fetchPassages } from "./fetch-ahead";
import { gatherQueues } from "./gather-queues";
import { emptyScreen, type GatheredScreen, type QuarterWindow } from "./gathered";
import { addDayOf, addToTally, closeDayOf, closeQuarterOf, clustersFor, finishDays, type Clusters, type RatioTally } from "./ratio-tally";
import { QUARTERS, startAt } from "./starts";
import { delayOfCode } from "./stored-figures";
import { countDelays, createSums, delaySqOf, emptySums, stopsIn, subtractEntries, sumEntries, takeDelays, type EntrySums, type Taken } from "./sum-entries";
import type { ScoreFilter } from "./types";

interface Gathering {
  index: CatalogueIndex;
  clusters: Clusters;
  /** Each one cluster: the whole window of the day, or its quarters. */
  windows: readonly QuarterWindow[];
  /** 1 by dense movement. */
  isChosen: Uint8Array;
  out: GatheredScreen;
  /** Scratch, for one junction: 1 by number of the movement, and the sums of each. */
  isWanted: Uint8Array;
  sums: EntrySums;
  taken: Taken;
  codes: CodeHistogram;
  /** Greatest code that was counted in fine bins alone; -1 where none was. */
  mostCode: number;
  vehicles: DistinctSets;
}

/**
 * One pass over the traversals of the window, junction by junction, so that all that is added up for one stays in the
 * processor's cache. O(days × movements + traversals and leg quarters of the window).
 */
export function gatherScreen(days: readonly DayByJunction[], index: CatalogueIndex, filter: ScoreFilter): GatheredScreen {
  checkFilter(filter);
  const clusters = clustersFor(days.length);
  const most = mostMovements(index);
  const gathering: Gathering = {
    index,
    clusters,
    windows: windowsOf(filter, clusters),
    isChosen: chosenTurns(index, filter),
    out: emptyScreen(index, clusters),
    isWanted: new Uint8Array(256),
    sums: createSums(),
    taken: { vehicles: 0, delayS: 0 },
    codes: createHistogram(),
    mostCode: -1,
    vehicles: createDistinctSets(most, ENOUGH_VEHICLES),
  };
  const ordered = [...days].sort((a, b) => a.day - b.day);
  for (const day of ordered) renumberDay(day, index);
  const whole = { from: filter.fromQuarter, to: filter.toQuarter };
  for (let junction = 0; junction < index.junctions.length; junction++) {
    beginJunction(gathering, junction);
    fetchPassages(ordered, junction, whole);
    for (const day of ordered) addDay(gathering, day, junction);
    finishJunction(gathering, junction);
  }
  const { out } = gathering;
  if (clusters === "days") for (const level of [out.movements, out.legs, out.junctions]) finishDays(level.delay);
  rollUp(out.movements, index.legOf, out.legs);
  rollUp(out.movements, index.junctionOf, out.junctions);
  gatherQueues(ordered, index, gathering.windows, out);
  return out;
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

function mostMovements({ junctionOffset }: CatalogueIndex): number {
  return junctionOffset.reduce((most, offset, j) => Math.max(most, j === 0 ? 0 : offset - junctionOffset[j - 1]), 0);
}

function beginJunction({ index, isChosen, isWanted, sums, vehicles }: Gathering, junction: number): void {
  isWanted.fill(0);
  isWanted.set(isChosen.subarray(index.junctionOffset[junction], index.junctionOffset[junction + 1]));
  emptySums(sums);
  vehicles.begin(isWanted);
}

function addDay(gathering: Gathering, day: DayByJunction, junction: number): void {
  const row = day.rowOf[junction];
  if (row < 0) return;
  const { windows, isWanted, sums, codes } = gathering;
  for (const window of windows) {
    const from = startAt(day.passedStart, row, window.from);
    const to = startAt(day.passedStart, row, window.to);
    if (from === to) continue;
    if (gathering.clusters === "days" && isMostOf(from, to, startAt(day.passedStart, row, 0), startAt(day.passedStart, row, QUARTERS))) {
      addMostOfDay(gathering, day, junction, from, to);
    } else sumEntries(day.passed, from, to, isWanted, sums, codes);
    gathering.vehicles.addEntries(day.passed, day.vehicle, from, to);
    closeCluster(gathering, junction);
  }
  if (gathering.clusters === "quarters") closeUnits(gathering, junction);
}

/** The whole day without what lies outside from..to. */
function addMostOfDay(gathering: Gathering, day: DayByJunction, junction: number, from: number, to: number): void {
  const { index, isWanted, sums, codes } = gathering;
  const totals = totalsOf(day);
  const first = index.junctionOffset[junction];
  for (let u = first; u < index.junctionOffset[junction + 1]; u++) {
    if (isWanted[u - first] === 0) continue;
    sums.delays[u - first] = totals.delays[u];
    sums.stops[u - first] += totals.stops[u];
    sums.squares[u - first] += totals.squares[u];
  }
  const row = day.rowOf[junction];
  subtractEntries(day.passed, startAt(day.passedStart, row, 0), from, isWanted, sums);
  subtractEntries(day.passed, to, startAt(day.passedStart, row, QUARTERS), isWanted, sums);
  gathering.mostCode = countDelays(day.passed, from, to, isWanted, codes.fine, gathering.mostCode);
}

/** Adds the sums to the movements of a junction, to its legs and to itself, as one cluster of each. */
function closeCluster(gathering: Gathering, junction: number): void {
  const { index, out, sums, taken } = gathering;
  const first = index.junctionOffset[junction];
  let vehicles = 0;
  let delayS = 0;
  for (let leg = index.junctionLegOffset[junction]; leg < index.junctionLegOffset[junction + 1]; leg++) {
    let ofLeg = 0;
    let ofLegS = 0;
    for (let u = index.legOffset[leg]; u < index.legOffset[leg + 1]; u++) {
      if (sums.delays[u - first] === 0) continue;
      takeDelays(sums, u - first, taken);
      addCluster(gathering, out.movements.delay, u, taken.vehicles, taken.delayS);
      ofLeg += taken.vehicles;
      ofLegS += taken.delayS;
    }
    addCluster(gathering, out.legs.delay, leg, ofLeg, ofLegS);
    vehicles += ofLeg;
    delayS += ofLegS;
  }
  addCluster(gathering, out.junctions.delay, junction, vehicles, delayS);
}

function addCluster({ clusters }: Gathering, tally: RatioTally, unit: number, base: number, total: number): void {
  if (base === 0) return;
  if (clusters === "days") addDayOf(tally, unit, base, total);
  else {
    addToTally(tally, unit, base, total);
    closeQuarterOf(tally, unit);
  }
}

/** The day is over for a junction and all that belongs to it. */
function closeUnits({ index, out }: Gathering, junction: number): void {
  for (let u = index.junctionOffset[junction]; u < index.junctionOffset[junction + 1]; u++) closeDayOf(out.movements.delay, u);
  for (let leg = index.junctionLegOffset[junction]; leg < index.junctionLegOffset[junction + 1]; leg++) closeDayOf(out.legs.delay, leg);
  closeDayOf(out.junctions.delay, junction);
}

function finishJunction(gathering: Gathering, junction: number): void {
  const { index, out, codes, vehicles, sums } = gathering;
  if (gathering.mostCode >= 0) coarsen(codes, gathering.mostCode);
  gathering.mostCode = -1;
  const first = index.junctionOffset[junction];
  const count = out.junctions.delay.base[junction];
  if (count >= LEAST_FOR_MEDIAN) out.medianS[junction] = histogramQuantile(codes, count, 0.5, delayOfCode);
  if (count >= LEAST_FOR_P95) out.p95S[junction] = histogramQuantile(codes, count, 0.95, delayOfCode);
  for (let u = first; u < index.junctionOffset[junction + 1]; u++) {
    const { stops, stopped } = stopsIn(sums, u - first);
    out.movements.sumSq[u] = delaySqOf(sums, u - first);
    out.movements.stops[u] = stops;
    out.movements.stopped[u] = stopped;
    out.distinct.movements[u] = vehicles.count(u - first, u - first + 1);
  }
  for (let leg = index.junctionLegOffset[junction]; leg < index.junctionLegOffset[junction + 1]; leg++) {
    out.distinct.legs[leg] = vehicles.count(index.legOffset[leg] - first, index.legOffset[leg + 1] - first);
  }
  out.distinct.junctions[junction] = vehicles.count(0, index.junctionOffset[junction + 1] - first);
  out.traversals += count;
  emptyHistogram(codes);
}
