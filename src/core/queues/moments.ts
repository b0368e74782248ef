import { columnReach } from "./column-reach";
import { tailAt, type TailSpan } from "./joined-tails";
import { QUARTER_MS, type QueueOptions } from "./options";
import type { Presence } from "./presence";
import type { Standings } from "./standings";
import { columnOptions, expectedBehindM, longestBehindM, tailGrowthMs } from "./unseen-tail";

/** From fewer vehicles than this the flow is known too badly to tell by how much it may exceed its mean. */
const LEAST_OTHERS = 5;

/** One leg's part of the columns. */
export interface LegView {
  storageM: number;
  /** Seen vehicles per metre of standing column; NaN where unknown. */
  perMetre: number;
  standings: Standings;
  standingFrom: number;
  standingTo: number;
  /** What those who joined tell of the tail, by end; first that is not over yet. */
  tails: readonly TailSpan[];
  tailFrom: number;
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

/** Where a queue ends, metres from the stop line, 0 without one. */
export interface Tail {
  expectedM: number;
  /** At least, places being uncertain. */
  leastM: number;
  /** Where more vehicles than expected may have joined unseen. */
  farthestM: number;
}

/** `reachM`: farthest standing vehicle of the column. `tail` is the same object in every call. */
export type MomentVisitor = (tMs: number, reachM: number, tail: Readonly<Tail>) => void;

/**
 * Visits the quarter that begins at `startMs` every `stepS`, in the middle of each step, while a vehicle can speak and
 * any stands or is remembered; returns the seconds for which one can speak. O(moments × standing²).
 */
export function eachMoment(leg: LegView, startMs: number, given: QueueOptions, scratch: Scratch, visit: MomentVisitor): number {
  const options = columnOptions(given, leg.perMetre);
  const endMs = startMs + QUARTER_MS;
  const others = othersAround(leg, startMs);
  const growthMs = tailGrowthMs(others.perSecond, leg.perMetre, options);
  const wholeGrowthMs = leg.perMetre > 0 ? others.perSecond / leg.perMetre : 0;
  const stepMs = options.stepS * 1000;
  const sightMs = options.sightS * 1000;
  const { presence, presenceTo } = leg;
  let next = leg.standingFrom;
  let present = leg.presenceFrom;
  let seenUntilMs = -Infinity;
  let observedS = 0;
  const tail: Tail = { expectedM: 0, leastM: 0, farthestM: 0 };
  scratch.count = 0;
  for (let tMs = startMs + stepMs / 2; tMs < endMs; tMs += stepMs) {
    for (; present < presenceTo && presence.fromMs[present] - sightMs <= tMs; present++) {
      seenUntilMs = Math.max(seenUntilMs, presence.untilMs[present]);
    }
    if (seenUntilMs < tMs) continue;
    observedS += options.stepS;
    next = remember(scratch, leg, next, tMs, options.memoryS * 1000);
    tail.expectedM = 0;
    tail.leastM = 0;
    tail.farthestM = 0;
    takeJoined(tail, leg, tMs, wholeGrowthMs);
    if (scratch.count === 0 && tail.expectedM === 0) continue;
    const reachM = reachOf(scratch, leg.standings, options);
    takeExpected(tail, scratch, leg, reachM, tMs, growthMs, options);
    if (others.count < LEAST_OTHERS) tail.farthestM = tail.expectedM;
    visit(tMs, reachM, tail);
  }
  return observedS;
}

/**
 * Vehicles of the sample that come on the leg in this quarter and its neighbours, and those a second, beside the one
 * whose queue is looked at: one is left out, since without it nobody would look.
 */
function othersAround(leg: LegView, startMs: number): { count: number; perSecond: number } {
  let quarters = 0;
  for (const start of [startMs - QUARTER_MS, startMs, startMs + QUARTER_MS]) if (leg.seenQuarters.has(start)) quarters++;
  const first = firstAtLeast(leg.presence.fromMs, leg.presenceAll, leg.presenceTo, startMs - QUARTER_MS);
  const last = firstAtLeast(leg.presence.fromMs, leg.presenceAll, leg.presenceTo, startMs + 2 * QUARTER_MS);
  const count = Math.max(0, last - first - 1);
  return { count, perSecond: quarters === 0 ? 0 : count / ((quarters * QUARTER_MS) / 1000) };
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
  let sureM = 0;
  for (let i = 0; i < count; i++) {
    const s = standings.s[index[i]];
    if (standings.isQueuing[index[i]] === 1) sureM = Math.max(sureM, s);
    let at = i;
    for (; at > 0 && sorted[at - 1] > s; at--) sorted[at] = sorted[at - 1];
    sorted[at] = s;
  }
  return columnReach(sorted, count, options.headM, options.gapM, sureM);
}

/** Takes in what those who joined around a moment tell. */
function takeJoined(tail: Tail, leg: LegView, tMs: number, growthMs: number): void {
  while (leg.tailFrom < leg.tails.length && leg.tails[leg.tailFrom].toMs < tMs) leg.tailFrom++;
  for (let k = leg.tailFrom; k < leg.tails.length; k++) {
    if (leg.tails[k].fromMs > tMs) break;
    take(tail, tailAt(leg.tails[k], tMs, growthMs), leg.tails[k].doubtM);
  }
}

/** Takes in the expected end of the queue behind every vehicle of the column. */
function takeExpected(tail: Tail, scratch: Scratch, leg: LegView, reachM: number, tMs: number, growthMs: number, options: QueueOptions): void {
  const meanGapM = leg.perMetre > 0 ? 1 / leg.perMetre : 0;
  const longestM = leg.storageM > 0 ? leg.storageM : Infinity;
  for (let i = 0; i < scratch.count; i++) {
    const k = scratch.index[i];
    const s = leg.standings.s[k];
    if (s > reachM) continue;
    const mostM = Math.min(meanGapM, longestM - s);
    const behindM = expectedBehindM(leg.standings, k, tMs, growthMs, mostM, options);
    if (Number.isNaN(behindM)) continue;
    take(tail, s + behindM, leg.standings.doubtM[k]);
    tail.farthestM = Math.max(tail.farthestM, s + longestBehindM(behindM, mostM, options));
  }
}

function take(tail: Tail, expectedM: number, doubtM: number): void {
  if (expectedM > tail.expectedM) tail.expectedM = expectedM;
  if (expectedM - doubtM > tail.leastM) tail.leastM = expectedM - doubtM;
}
