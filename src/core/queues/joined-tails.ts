import { columnReach } from "./column-reach";
import type { QueueOptions } from "./options";
import type { Standings } from "./standings";

/** Stretches of time over which the tail of one leg's queue moves evenly from one place to another, by beginning. */
export interface TailSpan {
  fromMs: number;
  toMs: number;
  /** Tail at the beginning (NaN where unknown) and at the end, metres from the stop line. */
  fromM: number;
  toM: number;
  /** By how much both may be too far, metres. */
  doubtM: number;
}

interface Join {
  tMs: number;
  s: number;
  doubtM: number;
  /** Departure from its last stop in this queue. */
  leftMs: number;
}

/**
 * What vehicles that join a queue tell of its tail: whoever joins is the tail at that moment. Between two who join the
 * same queue, somebody who joined before still standing in it, the tail went evenly from one to the other. Of the time
 * before the first one only its place is known (`fromM` is NaN). Standings `from` to `to` are those of one leg.
 * O(standings × standing²).
 */
export function joinedTails(standings: Standings, from: number, to: number, options: QueueOptions): TailSpan[] {
  let heldUntilMs = -Infinity;
  let before: Join | null = null;
  return joinsInColumn(standings, from, to, options).map((join): TailSpan => {
    const isSameQueue = before !== null && heldUntilMs >= join.tMs;
    const span =
      before && isSameQueue
        ? { fromMs: before.tMs, toMs: join.tMs, fromM: before.s, toM: join.s, doubtM: Math.max(before.doubtM, join.doubtM) }
        : { fromMs: Math.max(join.tMs - options.sightS * 1000, before?.tMs ?? -Infinity), toMs: join.tMs, fromM: NaN, toM: join.s, doubtM: join.doubtM };
    heldUntilMs = Math.max(heldUntilMs, join.leftMs);
    before = join;
    return span;
  });
}

/** Tail by a span at one moment, growing at `growthMs` (m/s) where only its end is known; 0 where the span says nothing. */
export function tailAt(span: TailSpan, tMs: number, growthMs: number): number {
  if (tMs < span.fromMs || tMs > span.toMs) return 0;
  const leftS = (span.toMs - tMs) / 1000;
  if (Number.isNaN(span.fromM)) return growthMs > 0 ? Math.max(0, span.toM - growthMs * leftS) : 0;
  const share = span.toMs > span.fromMs ? (1000 * leftS) / (span.toMs - span.fromMs) : 0;
  return span.toM + share * (span.fromM - span.toM);
}

/** First stops of vehicles that belonged to the column when they began. */
function joinsInColumn(standings: Standings, from: number, to: number, options: QueueOptions): Join[] {
  const { s, fromMs, toMs, joinedMs, isQueuing, doubtM, traversal } = standings;
  const left = new Map<string, number>();
  const queueOf = (k: number): string => `${traversal[k]} ${joinedMs[k]}`;
  for (let k = from; k < to; k++) left.set(queueOf(k), Math.max(toMs[k], left.get(queueOf(k)) ?? -Infinity));
  const joins: Join[] = [];
  let first = from;
  for (let k = from; k < to; k++) {
    while (toMs[first] + options.memoryS * 1000 < fromMs[k]) first++;
    if (joinedMs[k] < fromMs[k]) continue;
    const places: number[] = [];
    for (let i = first; i < to && fromMs[i] <= fromMs[k]; i++) {
      if (toMs[i] + options.memoryS * 1000 >= fromMs[k]) places.push(s[i]);
    }
    places.sort((a, b) => a - b);
    if (isQueuing[k] === 1 || s[k] <= columnReach(places, places.length, options.headM, options.gapM)) {
      joins.push({ tMs: fromMs[k], s: s[k], doubtM: doubtM[k], leftMs: left.get(queueOf(k)) ?? toMs[k] });
    }
  }
  return joins;
}
