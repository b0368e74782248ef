import type { Leg, LegQuarters, Network, Traversals } from "@/core/types";
import { columnReach } from "./column-reach";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS, type QueueOptions } from "./options";
import { presenceByLeg, type Presence } from "./presence";
import { findStandings, type Standings } from "./standings";
import { unseenTailM } from "./unseen-tail";

/** What one quarter of one leg showed. */
interface QuarterFigures {
  reachM: number;
  reachEstimateM: number;
  spilledS: number;
  observedS: number;
}

/** Scratch for one pass over the city, as long as the fullest leg needs. */
interface Scratch {
  positions: Float64Array;
  standing: number[];
  present: number[];
}

/**
 * Queue of each leg in each quarter of an hour (UTC; every city clock is off by whole quarters) in which the sample
 * saw the leg: reach of the standing column that hangs together with the stop line, seconds spilled back, seconds for
 * which the sample can say. A quarter in which vehicles passed and none stood has reach 0; one in which nobody was
 * seen has no entry. `traversals` are all of the time span, in any order. O(traversals × log + quarters × 180 × standing).
 */
export function legQuarters(network: Network, traversals: Traversals, options: Partial<QueueOptions> = {}): LegQuarters {
  const chosen: QueueOptions = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const standings = findStandings(network, traversals, chosen);
  const presence = presenceByLeg(network, traversals, chosen);
  const rows: (QuarterFigures & { leg: number; startMs: number })[] = [];
  const scratch: Scratch = { positions: new Float64Array(standings.length), standing: [], present: [] };
  let cursor = 0;
  for (let leg = 0; leg < network.legs.length; leg++) {
    let until = cursor;
    while (until < standings.length && standings.leg[until] === leg) until++;
    for (const startMs of quartersOf(presence, leg)) {
      const figures = quarterFigures(network.legs[leg], startMs, standings, cursor, until, presence, leg, chosen, scratch);
      if (figures) rows.push({ leg, startMs, ...figures });
    }
    cursor = until;
  }
  return columnsOf(rows);
}

/** Starts of the quarters that any vehicle's presence on the leg touches, ascending. */
function quartersOf(presence: Presence, leg: number): number[] {
  const starts = new Set<number>();
  for (let k = presence.offset[leg]; k < presence.offset[leg + 1]; k++) {
    const first = Math.floor(presence.fromMs[k] / QUARTER_MS) * QUARTER_MS;
    for (let start = first; start < presence.toMs[k]; start += QUARTER_MS) starts.add(start);
  }
  return [...starts].sort((a, b) => a - b);
}

function quarterFigures(
  leg: Leg,
  startMs: number,
  standings: Standings,
  from: number,
  to: number,
  presence: Presence,
  legIndex: number,
  options: QueueOptions,
  scratch: Scratch,
): QuarterFigures | null {
  const memoryMs = options.memoryS * 1000;
  const endMs = startMs + QUARTER_MS;
  collect(scratch.standing, standings, from, to, startMs - memoryMs, endMs);
  collect(scratch.present, presence, presence.offset[legIndex], presence.offset[legIndex + 1], startMs, endMs);
  let reachM = 0;
  let spilledSteps = 0;
  let observedSteps = 0;
  const stepMs = options.stepS * 1000;
  for (let tMs = startMs + stepMs / 2; tMs < endMs; tMs += stepMs) {
    if (!covers(scratch.present, presence, tMs)) continue;
    observedSteps++;
    const column = reachAt(scratch, standings, tMs, memoryMs, options);
    if (column > reachM) reachM = column;
    if (column >= options.spillShare * leg.storageM) spilledSteps++;
  }
  if (observedSteps === 0) return null;
  const tailM = reachM > 0 ? unseenTailM(scratch.standing, standings, scratch.present.length, reachM, options) : 0;
  const longest = leg.storageM > 0 ? Math.max(leg.storageM, reachM) : Infinity;
  return {
    reachM,
    reachEstimateM: Math.min(longest, reachM + tailM),
    spilledS: leg.storageM > 0 ? spilledSteps * options.stepS : NaN,
    observedS: observedSteps * options.stepS,
  };
}

/** Indices whose span touches [fromMs, toMs). The columns are in order of their beginning. */
function collect(
  out: number[],
  spans: { fromMs: Float64Array; toMs: Float64Array },
  from: number,
  to: number,
  fromMs: number,
  toMs: number,
): void {
  out.length = 0;
  for (let k = from; k < to && spans.fromMs[k] < toMs; k++) if (spans.toMs[k] >= fromMs) out.push(k);
}

function covers(indices: number[], spans: Presence, tMs: number): boolean {
  return indices.some((k) => spans.fromMs[k] <= tMs && tMs <= spans.toMs[k]);
}

function reachAt(scratch: Scratch, standings: Standings, tMs: number, memoryMs: number, options: QueueOptions): number {
  let count = 0;
  for (const k of scratch.standing) {
    if (standings.fromMs[k] <= tMs && tMs <= standings.toMs[k] + memoryMs) scratch.positions[count++] = standings.s[k];
  }
  scratch.positions.subarray(0, count).sort();
  return columnReach(scratch.positions, count, options.headM, options.gapM);
}

function columnsOf(rows: (QuarterFigures & { leg: number; startMs: number })[]): LegQuarters {
  return {
    length: rows.length,
    leg: Uint32Array.from(rows, (r) => r.leg),
    startMs: Float64Array.from(rows, (r) => r.startMs),
    reachM: Float32Array.from(rows, (r) => r.reachM),
    reachEstimateM: Float32Array.from(rows, (r) => r.reachEstimateM),
    spilledS: Float32Array.from(rows, (r) => r.spilledS),
    observedS: Float32Array.from(rows, (r) => r.observedS),
  };
}
