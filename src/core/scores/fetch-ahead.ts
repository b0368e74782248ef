import { QUARTERS, type DayByJunction } from "./day-by-junction";
import type { QuarterWindow } from "./gathered";

/** Entries of four bytes in a line of cache. */
const LINE = 16;
/** Longer stretches are read in order, which the processor foresees by itself. */
const MOST = 8 * LINE;

/** What was read goes nowhere else, but an optimiser must not know. */
const seen = new Uint32Array(1);

/**
 * Reads one word of each line of cache that a junction's window needs, on all days. These reads wait for nothing but
 * memory, so that many wait together; the sums that follow, day after day, would wait for each by itself. O(days).
 */
export function fetchPassages(days: readonly DayByJunction[], junction: number, { from: first, to: last }: QuarterWindow): void {
  let all = 0;
  for (let k = 0; k < days.length; k++) {
    const { rowOf, passedStart, passed, vehicle } = days[k];
    const row = rowOf[junction];
    if (row < 0) continue;
    const from = passedStart[row * QUARTERS + first];
    const to = Math.min(passedStart[row * QUARTERS + last], from + MOST);
    for (let i = from; i < to; i += LINE) all ^= passed[i] ^ vehicle[i];
  }
  seen[0] = all;
}

/** The same for the queues of a junction's legs. */
export function fetchQueues(days: readonly DayByJunction[], junction: number, { from: first, to: last }: QuarterWindow): void {
  let all = 0;
  for (let k = 0; k < days.length; k++) {
    const { rowOf, queueStart, ofLeg, reach, spilled, observed } = days[k];
    const row = rowOf[junction];
    if (row < 0) continue;
    const from = queueStart[row * QUARTERS + first];
    const to = Math.min(queueStart[row * QUARTERS + last], from + MOST);
    for (let i = from; i < to; i += LINE) all ^= ofLeg[i] ^ reach[i] ^ spilled[i] ^ observed[i];
  }
  seen[0] = all;
}
