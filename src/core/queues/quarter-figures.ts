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
  presenceFrom: number;
  presenceTo: number;
}

/** What one quarter of one leg showed. */
export interface QuarterFigures {
  reachM: number;
  reachEstimateM: number;
  spilledS: number;
  observedS: number;
}

/** Looks at the column every `stepS`; null where nobody could speak for the leg. O(steps × standing × log). */
export function quarterFigures(leg: LegView, startMs: number, options: QueueOptions): QuarterFigures | null {
  const memoryMs = options.memoryS * 1000;
  const endMs = startMs + QUARTER_MS;
  const standing = touching(leg.standings, leg.standingFrom, leg.standingTo, startMs - memoryMs, endMs);
  const present = touching(leg.presence, leg.presenceFrom, leg.presenceTo, startMs, endMs);
  const stepMs = options.stepS * 1000;
  const moments: number[] = [];
  for (let tMs = startMs + stepMs / 2; tMs < endMs; tMs += stepMs) if (isSeen(present, leg.presence, tMs)) moments.push(tMs);
  if (moments.length === 0) return null;
  const observedS = moments.length * options.stepS;
  const growthMs = tailGrowthMs(arrivals(present, leg.presence, startMs, endMs, options) / observedS, leg.perMetre);
  const longestM = leg.storageM > 0 ? leg.storageM : Infinity;
  const figures: QuarterFigures = { reachM: 0, reachEstimateM: 0, spilledS: leg.storageM > 0 ? 0 : NaN, observedS };
  for (const tMs of moments) {
    const tails = tailsAt(leg, standing, tMs, growthMs, options);
    figures.reachM = Math.max(figures.reachM, tails.seenM);
    figures.reachEstimateM = Math.max(figures.reachEstimateM, Math.min(longestM, tails.expectedM));
    if (tails.expectedM >= options.spillShare * leg.storageM) figures.spilledS += options.stepS;
  }
  return figures;
}

/** Indices whose span touches [fromMs, toMs). The columns are in order of their beginning. */
function touching(spans: { fromMs: Float64Array; toMs: Float64Array }, from: number, to: number, fromMs: number, toMs: number): number[] {
  const found: number[] = [];
  for (let k = from; k < to && spans.fromMs[k] < toMs; k++) if (spans.toMs[k] >= fromMs) found.push(k);
  return found;
}

function isSeen(present: number[], presence: Presence, tMs: number): boolean {
  return present.some((k) => presence.fromMs[k] <= tMs && tMs <= presence.toMs[k]);
}

function arrivals(present: number[], presence: Presence, startMs: number, endMs: number, options: QueueOptions): number {
  const sightMs = options.sightS * 1000;
  return present.filter((k) => presence.fromMs[k] + sightMs >= startMs && presence.fromMs[k] + sightMs < endMs).length;
}

/** Farthest standing vehicle of the column, and where the queue behind it is expected to end. */
function tailsAt(leg: LegView, standing: number[], tMs: number, growthMs: number, options: QueueOptions): { seenM: number; expectedM: number } {
  const { standings } = leg;
  const memoryMs = options.memoryS * 1000;
  const remembered = standing.filter((k) => standings.fromMs[k] <= tMs && tMs <= standings.toMs[k] + memoryMs);
  const positions = remembered.map((k) => standings.s[k]).sort((a, b) => a - b);
  const reachM = columnReach(positions, positions.length, options.headM, options.gapM);
  const tails = { seenM: reachM, expectedM: 0 };
  for (const k of remembered) {
    if (standings.s[k] > reachM) continue;
    const expectedM = expectedTailM(standings, k, tMs, growthMs, 1 / leg.perMetre, options);
    if (expectedM > tails.expectedM) tails.expectedM = expectedM;
  }
  return tails;
}
