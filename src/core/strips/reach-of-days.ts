import { fullFromM } from "@/core/queues/full-from";
import { createScratch, eachMoment } from "@/core/queues/moments";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS, type QueueOptions } from "@/core/queues/options";
import type { TrackColumns } from "@/core/queues/standings";
import { viewOfTracks } from "@/core/queues/tracks-of-leg";
import type { TrackSet } from "./track-set";

/**
 * Reach of the queue on each day at evenly spaced moments. Row-major: entry = day * steps + step;
 * NaN where no vehicle was on the leg to tell, 0 where vehicles were and no column stood.
 */
export interface DayReaches {
  fromS: number;
  stepS: number;
  steps: number;
  /** Local days with tracks, ascending. */
  days: Int32Array;
  reachM: Float32Array;
  /** Where the queue is expected to end, the unseen tail behind the last seen vehicle with it (a model). */
  tailM: Float32Array;
  /** Where it ends at least, places of vehicles being uncertain. */
  leastTailM: Float32Array;
}

/**
 * Back of the standing column that hangs together with the stop line, day by day, by the same rules as the
 * stored quarters: a stop begins below 5 km/h and ends above 10, the column's head stands within `headM`,
 * its gaps are below `gapM`, and a stop is remembered for `memoryS`. Vehicles that wait in the upstream
 * junction's box are left out. Give all tracks of the leg: a choice of movements would make holes in the queue.
 * Looked at in the middle of each step; `fromS` is a multiple of the step. O(points + moments × standing²).
 */
export function reachOfDays(set: TrackSet, fromS: number, toS: number, storageM: number, options: Partial<QueueOptions> = {}): DayReaches {
  const chosen: QueueOptions = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const steps = Math.max(0, Math.ceil((toS - fromS) / chosen.stepS));
  const starts = dayStarts(set);
  const days = Int32Array.from(starts, (start) => set.day[start]);
  const size = days.length * steps;
  const result: DayReaches = {
    fromS, stepS: chosen.stepS, steps, days, reachM: new Float32Array(size).fill(NaN), tailM: new Float32Array(size).fill(NaN),
    leastTailM: new Float32Array(size).fill(NaN),
  };
  const columns: TrackColumns = { enterMs: new Float64Array(set.tracks), trackOffset: set.offset, trackT: set.tS, trackS: set.sM };
  starts.forEach((start, d) => readDay(result, d, columns, start, starts[d + 1] ?? set.tracks, storageM, chosen));
  return result;
}

/** Share of the observed moments, all days together, at which the queue filled at least `spillShare` of the storage; NaN where it cannot be said. */
export function spillShare(reaches: DayReaches, storageM: number, options: Partial<QueueOptions> = {}): number {
  const chosen = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const full = fullFromM(storageM, chosen);
  if (Number.isNaN(full)) return NaN;
  let observed = 0;
  let spilled = 0;
  for (const tail of reaches.leastTailM) {
    if (Number.isNaN(tail)) continue;
    observed++;
    if (tail >= full) spilled++;
  }
  return observed === 0 ? NaN : spilled / observed;
}

/** First track of each day. */
function dayStarts(set: TrackSet): number[] {
  const starts: number[] = [];
  for (let i = 0; i < set.tracks; i++) if (i === 0 || set.day[i] !== set.day[i - 1]) starts.push(i);
  return starts;
}

function readDay(out: DayReaches, day: number, columns: TrackColumns, from: number, to: number, storageM: number, options: QueueOptions): void {
  const view = viewOfTracks(columns, from, to, storageM, options);
  const reachM = out.reachM.subarray(day * out.steps, (day + 1) * out.steps);
  const tailM = out.tailM.subarray(day * out.steps, (day + 1) * out.steps);
  const leastTailM = out.leastTailM.subarray(day * out.steps, (day + 1) * out.steps);
  for (let k = 0; k < view.presenceTo; k++) {
    // A vehicle speaks for the leg from `sightS` before it came as long as it can be seen from.
    const begin = Math.ceil((view.presence.fromMs[k] / 1000 - options.sightS - out.fromS) / out.stepS - 0.5);
    const until = Math.floor((view.presence.untilMs[k] / 1000 - out.fromS) / out.stepS - 0.5);
    for (const column of [reachM, tailM, leastTailM]) column.fill(0, Math.max(0, begin), Math.max(0, until + 1));
  }
  const scratch = createScratch(view.standings.length);
  const lastMs = (out.fromS + out.steps * out.stepS) * 1000;
  for (let startMs = Math.floor((out.fromS * 1000) / QUARTER_MS) * QUARTER_MS; startMs < lastMs; startMs += QUARTER_MS) {
    eachMoment(view, startMs, options, scratch, (tMs, reach, tail) => {
      const step = Math.floor((tMs / 1000 - out.fromS) / out.stepS);
      if (!(reachM[step] >= 0)) return;
      reachM[step] = reach;
      tailM[step] = tail.expectedM;
      leastTailM[step] = tail.leastM;
    });
  }
}
