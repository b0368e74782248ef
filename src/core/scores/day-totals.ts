import { createHistogram, emptyHistogram } from "./code-histogram";
import type { CatalogueIndex } from "./catalogue-index";
import type { DayByJunction } from "./day-by-junction";
import { addSeconds } from "./queue-seconds";
import { QUARTERS, startAt } from "./starts";
import { createSums, emptySums, sumEntries } from "./sum-entries";

/**
 * Sums over a whole day, by dense movement and leg: a long window is the day without what lies outside, which costs
 * less than to add up what lies inside.
 */
export interface DayTotals {
  index: CatalogueIndex;
  delays: Float64Array;
  stops: Float64Array;
  squares: Float64Array;
  /** Of legs, as `addSeconds` adds them up. */
  seconds: Float64Array;
}

/** Whether so much of begin..end lies in from..to that the totals are worth while. */
export function isMostOf(from: number, to: number, begin: number, end: number): boolean {
  return 3 * (to - from) > 2 * (end - begin);
}

/** Bytes of the totals of one day. */
export function bytesOfTotals(index: CatalogueIndex): number {
  return 8 * (3 * index.movements.length + index.legs.length);
}

const known = new WeakMap<DayByJunction, DayTotals>();

/** Added up at the first question and kept as long as the day and its numbers are. O(traversals of the day). */
export function totalsOf(day: DayByJunction): DayTotals {
  const earlier = known.get(day);
  if (earlier?.index === day.index) return earlier;
  const totals = addUp(day);
  known.set(day, totals);
  return totals;
}

function addUp(day: DayByJunction): DayTotals {
  const { index } = day;
  const totals: DayTotals = {
    index,
    delays: new Float64Array(index.movements.length),
    stops: new Float64Array(index.movements.length),
    squares: new Float64Array(index.movements.length),
    seconds: new Float64Array(index.legs.length),
  };
  const all = new Uint8Array(256).fill(1);
  const sums = createSums();
  const codes = createHistogram();
  const slots = new Float64Array(256);
  day.rowOf.forEach((row, junction) => {
    if (row < 0) return;
    emptySums(sums);
    sumEntries(day.passed, startAt(day.passedStart, row, 0), startAt(day.passedStart, row, QUARTERS), all, sums, codes);
    const [first, end] = [index.junctionOffset[junction], index.junctionOffset[junction + 1]];
    for (const name of ["delays", "stops", "squares"] as const) totals[name].set(sums[name].subarray(0, end - first), first);
    slots.fill(0);
    addSeconds(day, startAt(day.queueStart, row, 0), startAt(day.queueStart, row, QUARTERS), slots, 1);
    const [firstLeg, endLeg] = [index.junctionLegOffset[junction], index.junctionLegOffset[junction + 1]];
    totals.seconds.set(slots.subarray(0, endLeg - firstLeg), firstLeg);
    emptyHistogram(codes);
  });
  return totals;
}
