import { columnReach } from "./column-reach";
import { QUARTER_MS, type QueueOptions } from "./options";
import type { Presence } from "./presence";
import type { Standings } from "./standings";
import { expectedTailM, tailGrowthMs } from "./unseen-tail";

/** One leg's part of the columns. */
export interface LegView {
  storageM: number;
  /** Seen vehicles per metre of standing column; NaN where unknown. */
  perMetre: number;
  standings: Standings;
  standingFrom: number;
  standingTo: number;
  presence: Presence;
  /** First of the leg's, and first that is not over yet. */
  presenceAll: number;
  presenceFrom: number;
  presenceTo: number;
  /** Starts of the quarters in which the sample saw anything at all: others say nothing of the flow. */
  seenQuarters: ReadonlySet<number>;
}

/** Standings remembered at one moment, and their places in ascending order; reused from moment to moment. */
export interface Scratch {
  count: number;
  index: Uint32Array;
  sorted: Float64Array;
}

export function createScratch(standings: number): Scratch {
  return { count: 0, index: new Uint32Array(standings), sorted: new Float64Array(standings) };
}

/** `reachM`: farthest standing vehicle of the column; `tailM`: where the queue behind it is expected to end. */
export type MomentVisitor = (tMs: number, reachM: number, tailM: number) => void;

/**
 * Visits the quarter that begins at `startMs` every `stepS`, in the middle of each step, while any vehicle stands or is
 * remembered; returns the seconds for which a vehicle can speak. O(moments × standing²).
 */
export function eachMoment(leg: LegView, startMs: number, options: QueueOptions, scratch: Scratch, visit: MomentVisitor): number {
  const endMs = startMs + QUARTER_MS;
  const observedS = observedSeconds(leg, startMs, endMs, options.sightS * 1000);
  const growthMs = tailGrowthMs(othersPerSecond(leg, startMs), leg.perMetre, options);
  const stepMs = options.stepS * 1000;
  let next = leg.standingFrom;
  scratch.count = 0;
  for (let tMs = startMs + stepMs / 2; tMs < endMs; tMs += stepMs) {
    next = remember(scratch, leg, next, tMs, options.memoryS * 1000);
    if (scratch.count === 0) {
      if (next === leg.standingTo) break;
      continue;
    }
    const reachM = reachOf(scratch, leg.standings, options);
    visit(tMs, reachM, expectedTail(scratch, leg, reachM, tMs, growthMs, options));
  }
  return observedS;
}

/** Seconds of the quarter for which a vehicle can speak. */
function observedSeconds(leg: LegView, startMs: number, endMs: number, sightMs: number): number {
  let observedMs = 0;
  let seenUntil = startMs;
  for (let k = leg.presenceFrom; k < leg.presenceTo && leg.presence.fromMs[k] - sightMs < endMs; k++) {
    const from = Math.max(seenUntil, leg.presence.fromMs[k] - sightMs);
    const to = Math.min(endMs, leg.presence.toMs[k] + sightMs);
    if (to <= from) continue;
    observedMs += to - from;
    seenUntil = to;
  }
  return observedMs / 1000;
}

/**
 * Vehicles of the sample that come on the leg a second, in this quarter and its neighbours, beside the one whose
 * queue is looked at: one is left out, since without it nobody would look.
 */
function othersPerSecond(leg: LegView, startMs: number): number {
  let quarters = 0;
  for (const start of [startMs - QUARTER_MS, startMs, startMs + QUARTER_MS]) if (leg.seenQuarters.has(start)) quarters++;
  const first = firstAtLeast(leg.presence.fromMs, leg.presenceAll, leg.presenceTo, startMs - QUARTER_MS);
  const last = firstAtLeast(leg.presence.fromMs, leg.presenceAll, leg.presenceTo, startMs + 2 * QUARTER_MS);
  return quarters === 0 ? 0 : Math.max(0, last - first - 1) / ((quarters * QUARTER_MS) / 1000);
}

/** First index in from..to whose value is at least `least`; the column ascends there. */
function firstAtLeast(column: Float64Array, from: number, to: number, least: number): number {
  let low = from;
  let high = to;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (column[middle] < least) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Takes in standings that have begun by `tMs` and drops those that ended more than the memory ago. */
function remember(scratch: Scratch, leg: LegView, next: number, tMs: number, memoryMs: number): number {
  const { fromMs, toMs } = leg.standings;
  let kept = 0;
  for (let i = 0; i < scratch.count; i++) {
    if (toMs[scratch.index[i]] + memoryMs >= tMs) scratch.index[kept++] = scratch.index[i];
  }
  for (; next < leg.standingTo && fromMs[next] <= tMs; next++) {
    if (toMs[next] + memoryMs >= tMs) scratch.index[kept++] = next;
  }
  scratch.count = kept;
  return next;
}

function reachOf(scratch: Scratch, standings: Standings, options: QueueOptions): number {
  const { sorted, index, count } = scratch;
  for (let i = 0; i < count; i++) {
    const s = standings.s[index[i]];
    let at = i;
    for (; at > 0 && sorted[at - 1] > s; at--) sorted[at] = sorted[at - 1];
    sorted[at] = s;
  }
  return columnReach(sorted, count, options.headM, options.gapM);
}

/** Farthest expected end of the queue behind any vehicle of the column; 0 where none is left. */
function expectedTail(scratch: Scratch, leg: LegView, reachM: number, tMs: number, growthMs: number, options: QueueOptions): number {
  const meanGapM = leg.perMetre > 0 ? 1 / leg.perMetre : 0;
  const longestM = leg.storageM > 0 ? leg.storageM : Infinity;
  let tailM = 0;
  for (let i = 0; i < scratch.count; i++) {
    const k = scratch.index[i];
    const s = leg.standings.s[k];
    if (s > reachM) continue;
    const expectedM = expectedTailM(leg.standings, k, tMs, growthMs, Math.min(meanGapM, longestM - s), options);
    if (expectedM > tailM) tailM = expectedM;
  }
  return tailM;
}
