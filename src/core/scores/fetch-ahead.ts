import type { DayByJunction } from "./day-by-junction";
import type { QuarterWindow } from "./gathered";
import { startAt, type Starts } from "./starts";

/** Entries of four bytes in a line of cache. */
const LINE = 16;
/** Longer stretches are read in order, which the processor foresees by itself. */
const MOST = 8 * LINE;

/** What was read goes nowhere else, but an optimiser must not know. */
const seen = new Uint32Array(1);

/** Where the stretches of the days at hand begin and end. */
let stretches = new Uint32Array(0);

/**
 * Reads one word of each line of cache that a junction's window needs, on all days: first where the stretches begin,
 * then the stretches. Reads of one loop wait for nothing but memory, so that many wait together; the sums that follow,
 * day after day, would wait for each by itself. O(days).
 */
export function fetchPassages(days: readonly DayByJunction[], junction: number, { from: first, to: last }: QuarterWindow): void {
  makeRoom(days.length);
  for (let k = 0; k < days.length; k++) {
    const { rowOf, passedStart } = days[k];
    noteStretch(k, rowOf[junction], passedStart, first, last);
  }
  let all = 0;
  for (let k = 0; k < days.length; k++) {
    const { passed, vehicle } = days[k];
    for (let i = stretches[2 * k]; i < stretches[2 * k + 1]; i += LINE) all ^= passed[i] ^ vehicle[i];
  }
  seen[0] = all;
}

/** The same for the queues of a junction's legs. */
export function fetchQueues(days: readonly DayByJunction[], junction: number, { from: first, to: last }: QuarterWindow): void {
  makeRoom(days.length);
  for (let k = 0; k < days.length; k++) {
    const { rowOf, queueStart } = days[k];
    noteStretch(k, rowOf[junction], queueStart, first, last);
  }
  let all = 0;
  for (let k = 0; k < days.length; k++) {
    const { ofLeg, reach, spilled, observed } = days[k];
    for (let i = stretches[2 * k]; i < stretches[2 * k + 1]; i += LINE) all ^= ofLeg[i] ^ reach[i] ^ spilled[i] ^ observed[i];
  }
  seen[0] = all;
}

function makeRoom(days: number): void {
  if (stretches.length < 2 * days) stretches = new Uint32Array(2 * days);
}

function noteStretch(k: number, row: number, start: Starts, first: number, last: number): void {
  const from = row < 0 ? 0 : startAt(start, row, first);
  stretches[2 * k] = from;
  stretches[2 * k + 1] = row < 0 ? 0 : Math.min(startAt(start, row, last), from + MOST);
}
