import type { CatalogueIndex } from "./catalogue-index";
import { CODES, coarsen, countOf, createHistogram, emptyHistogram, histogramOf, histogramQuantile, COARSE_SHIFT } from "./code-histogram";
import type { DayByJunction } from "./day-by-junction";
import { fetchQueues } from "./fetch-ahead";
import type { GatheredScreen, QuarterWindow } from "./gathered";
import { isMostOf, totalsOf } from "./day-totals";
import { addSeconds, observedS, spilledS } from "./queue-seconds";
import { addToTally, closeDayOf, closeQuarterOf, type RatioTally } from "./ratio-tally";
import { QUARTERS, startAt } from "./starts";
import { reachOfCode } from "./stored-figures";

/** What is added up for the legs of one junction; a slot for each. */
interface Slots {
  count: number;
  /** Reach by slot and code. */
  fine: Uint32Array;
  coarse: Uint32Array;
  /** Greatest code that was counted in fine bins alone; -1 where none was. */
  mostCode: number;
  /** Observed and spilled time of one day at most, in one number. */
  seconds: Float64Array;
}


/** Fills spillback and the 95th percentile of reach of every leg. O(leg quarters of the windows). */
export function gatherQueues(days: readonly DayByJunction[], index: CatalogueIndex, windows: readonly QuarterWindow[], out: GatheredScreen): void {
  const { junctionLegOffset } = index;
  const most = junctionLegOffset.reduce((sofar, offset, j) => Math.max(sofar, j === 0 ? 0 : offset - junctionLegOffset[j - 1]), 0);
  const slots: Slots = {
    count: most,
    ...createHistogram(most),
    mostCode: -1,
    // Legs that the catalogue does not list any more come last.
    seconds: new Float64Array(256),
  };
  const whole = { from: windows[0].from, to: windows[windows.length - 1].to };
  for (let junction = 0; junction < index.junctions.length; junction++) {
    const [first, end] = [junctionLegOffset[junction], junctionLegOffset[junction + 1]];
    fetchQueues(days, junction, whole);
    for (const day of days) addDay(day, junction, first, end, windows, slots, out.spill);
    for (let leg = first; leg < end; leg++) {
      const histogram = histogramOf(slots, leg - first);
      if (slots.mostCode >= 0) coarsen(histogram, slots.mostCode);
      out.reachP95M[leg] = histogramQuantile(histogram, countOf(histogram), 0.95, reachOfCode);
      emptyHistogram(histogram);
    }
    slots.mostCode = -1;
  }
}

function addDay(day: DayByJunction, junction: number, first: number, end: number, windows: readonly QuarterWindow[], slots: Slots, spill: RatioTally): void {
  const row = day.rowOf[junction];
  if (row < 0) return;
  for (const window of windows) {
    const from = startAt(day.queueStart, row, window.from);
    const to = startAt(day.queueStart, row, window.to);
    addEntries(day, { row, from, to, first, end, isWholeWindow: windows.length === 1 }, slots);
    for (let leg = first; leg < end; leg++) {
      const both = slots.seconds[leg - first];
      if (both === 0) continue;
      slots.seconds[leg - first] = 0;
      addToTally(spill, leg, observedS(both), spilledS(both));
      closeQuarterOf(spill, leg);
    }
  }
  for (let leg = first; leg < end; leg++) closeDayOf(spill, leg);
}

/** A stretch of a junction's entries, and its legs. */
interface Stretch {
  row: number;
  from: number;
  to: number;
  first: number;
  end: number;
  isWholeWindow: boolean;
}

/** Reach, and observed and spilled time, by number of the leg; what an entry does not know is left out. */
function addEntries(day: DayByJunction, { row, from, to, first, end, isWholeWindow }: Stretch, slots: Slots): void {
  const [rowFrom, rowTo] = [startAt(day.queueStart, row, 0), startAt(day.queueStart, row, QUARTERS)];
  if (isWholeWindow && isMostOf(from, to, rowFrom, rowTo)) {
    slots.seconds.set(totalsOf(day).seconds.subarray(first, end));
    addSeconds(day, rowFrom, from, slots.seconds, -1);
    addSeconds(day, to, rowTo, slots.seconds, -1);
    countFine(day, from, to, slots);
  } else {
    addSeconds(day, from, to, slots.seconds, 1);
    countReaches(day, from, to, slots);
  }
}

function countReaches({ ofLeg, reach }: DayByJunction, from: number, to: number, { fine, coarse, count }: Slots): void {
  for (let k = from; k < to; k++) {
    const code = reach[k];
    if (code === 0 || ofLeg[k] >= count) continue;
    const at = ofLeg[k] * CODES + code;
    fine[at] += 1;
    coarse[at >> COARSE_SHIFT] += 1;
  }
}

/** Fine bins alone: where there are many entries, the coarse ones are made sooner afterwards. */
function countFine({ ofLeg, reach }: DayByJunction, from: number, to: number, slots: Slots): void {
  const { fine, count } = slots;
  let most = slots.mostCode;
  for (let k = from; k < to; k++) {
    const code = reach[k];
    if (code === 0 || ofLeg[k] >= count) continue;
    fine[ofLeg[k] * CODES + code] += 1;
    if (code > most) most = code;
  }
  slots.mostCode = most;
}
