import type { CatalogueIndex } from "./catalogue-index";
import { CODES, countOf, createHistogram, emptyHistogram, histogramOf, histogramQuantile, COARSE_SHIFT } from "./code-histogram";
import { QUARTERS, type DayByJunction } from "./day-by-junction";
import { fetchQueues } from "./fetch-ahead";
import type { GatheredScreen, QuarterWindow } from "./gathered";
import { isSpillKnown } from "./leg-level";
import { addToTally, closeDayOf, closeQuarterOf, type RatioTally } from "./ratio-tally";
import { reachOfCode, STEPS_PER_S } from "./stored-figures";

/** What is added up for the legs of one junction; a slot for each. */
interface Slots {
  count: number;
  /** Reach by slot and code. */
  fine: Uint32Array;
  coarse: Uint32Array;
  /** Observed and spilled time of one day at most, in one number. */
  seconds: Float64Array;
}

/** Place of observed above spilled time: both below 2^26 steps in a day, and both in a number below 2^53. */
const OBSERVED = 2 ** 26;

/** Fills spillback and the 95th percentile of reach of every leg. O(leg quarters of the windows). */
export function gatherQueues(days: readonly DayByJunction[], index: CatalogueIndex, windows: readonly QuarterWindow[], out: GatheredScreen): void {
  const { junctionLegOffset } = index;
  const most = junctionLegOffset.reduce((sofar, offset, j) => Math.max(sofar, j === 0 ? 0 : offset - junctionLegOffset[j - 1]), 0);
  const slots: Slots = {
    count: most,
    ...createHistogram(most),
    seconds: new Float64Array(most),
  };
  const whole = { from: windows[0].from, to: windows[windows.length - 1].to };
  for (let junction = 0; junction < index.junctions.length; junction++) {
    const [first, end] = [junctionLegOffset[junction], junctionLegOffset[junction + 1]];
    fetchQueues(days, junction, whole);
    for (const day of days) addDay(day, junction, first, end, windows, slots, out.spill);
    for (let leg = first; leg < end; leg++) {
      const histogram = histogramOf(slots, leg - first);
      out.reachP95M[leg] = histogramQuantile(histogram, countOf(histogram), 0.95, reachOfCode);
      emptyHistogram(histogram);
    }
  }
}

function addDay(day: DayByJunction, junction: number, first: number, end: number, windows: readonly QuarterWindow[], slots: Slots, spill: RatioTally): void {
  const row = day.rowOf[junction];
  if (row < 0) return;
  for (const window of windows) {
    const from = day.queueStart[row * QUARTERS + window.from];
    const to = day.queueStart[row * QUARTERS + window.to];
    addEntries(day, from, to, slots);
    for (let leg = first; leg < end; leg++) {
      const both = slots.seconds[leg - first];
      if (both === 0) continue;
      slots.seconds[leg - first] = 0;
      const observed = Math.floor(both / OBSERVED);
      addToTally(spill, leg, observed / STEPS_PER_S, (both - observed * OBSERVED) / STEPS_PER_S);
      closeQuarterOf(spill, leg);
    }
  }
  for (let leg = first; leg < end; leg++) closeDayOf(spill, leg);
}

/** What an entry does not know is left out. */
function addEntries({ ofLeg, reach, spilled, observed }: DayByJunction, from: number, to: number, slots: Slots): void {
  const { fine, coarse, count, seconds } = slots;
  for (let k = from; k < to; k++) {
    const slot = ofLeg[k];
    if (slot >= count) continue;
    const code = reach[k];
    if (code > 0) {
      const at = slot * CODES + code;
      fine[at] += 1;
      coarse[at >> COARSE_SHIFT] += 1;
    }
    const seen = observed[k];
    const full = spilled[k];
    if (isSpillKnown(seen, full)) seconds[slot] += (seen - 1) * OBSERVED + (full - 1);
  }
}
