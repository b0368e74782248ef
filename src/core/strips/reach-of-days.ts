import { columnReach } from "@/core/queues/column-reach";
import { DEFAULT_QUEUE_OPTIONS, type QueueOptions } from "@/core/queues/options";
import { stopsOfTrack, type TrackColumns } from "@/core/queues/standings";
import { COUNT_LINE_M } from "./track-crossings";
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
}

interface Span {
  fromS: number;
  toS: number;
  sM: number;
}

/**
 * Back of the standing column that hangs together with the stop line, day by day, by the same rules as the
 * stored quarters: a stop begins below 5 km/h and ends above 10, the column's head stands within `headM`,
 * its gaps are below `gapM`, and a stop is remembered for `memoryS`. Vehicles that wait in the upstream
 * junction's box are left out. Give all tracks of the leg: a choice of movements would make holes in the queue.
 * Looked at in the middle of each step of `stepS`. O(points + days × steps × standing).
 */
export function reachOfDays(set: TrackSet, fromS: number, toS: number, storageM: number, options: Partial<QueueOptions> = {}): DayReaches {
  const chosen: QueueOptions = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const steps = Math.max(0, Math.ceil((toS - fromS) / chosen.stepS));
  const starts = dayStarts(set);
  const days = Int32Array.from(starts, (start) => set.day[start]);
  const result: DayReaches = { fromS, stepS: chosen.stepS, steps, days, reachM: new Float32Array(days.length * steps).fill(NaN) };
  const columns: TrackColumns = { enterMs: new Float64Array(set.tracks), trackOffset: set.offset, trackT: set.tS, trackS: set.sM };
  starts.forEach((start, d) => {
    const out = result.reachM.subarray(d * steps, (d + 1) * steps);
    readDay(set, columns, start, starts[d + 1] ?? set.tracks, storageM, chosen, fromS, out);
  });
  return result;
}

/** Share of the observed moments, all days together, at which the queue filled at least `spillShare` of the storage; NaN where it cannot be said. */
export function spillShare(reaches: DayReaches, storageM: number, options: Partial<QueueOptions> = {}): number {
  const full = (options.spillShare ?? DEFAULT_QUEUE_OPTIONS.spillShare) * storageM;
  if (!(full > 0)) return NaN;
  let observed = 0;
  let spilled = 0;
  for (const reach of reaches.reachM) {
    if (Number.isNaN(reach)) continue;
    observed++;
    if (reach >= full) spilled++;
  }
  return observed === 0 ? NaN : spilled / observed;
}

/** First track of each day. */
function dayStarts(set: TrackSet): number[] {
  const starts: number[] = [];
  for (let i = 0; i < set.tracks; i++) if (i === 0 || set.day[i] !== set.day[i - 1]) starts.push(i);
  return starts;
}

function readDay(
  set: TrackSet,
  columns: TrackColumns,
  from: number,
  to: number,
  storageM: number,
  options: QueueOptions,
  fromS: number,
  out: Float32Array,
): void {
  const farthest = storageM > 0 ? storageM : Infinity;
  const stops: Span[] = [];
  for (let i = from; i < to; i++) {
    markPresence(set, i, options, fromS, out);
    for (const stop of stopsOfTrack(columns, i, options)) {
      if (stop.s < -options.pastLineM || stop.s > farthest) continue;
      stops.push({ fromS: stop.fromMs / 1000, toS: stop.toMs / 1000 + options.memoryS, sM: stop.s });
    }
  }
  stops.sort((a, b) => a.fromS - b.fromS);
  const standing: Span[] = [];
  const positions = new Float64Array(stops.length);
  let next = 0;
  for (let step = 0; step < out.length; step++) {
    const tS = fromS + (step + 0.5) * options.stepS;
    while (next < stops.length && stops[next].fromS <= tS) standing.push(stops[next++]);
    dropEnded(standing, tS);
    if (Number.isNaN(out[step])) continue;
    standing.forEach((stop, k) => (positions[k] = stop.sM));
    positions.subarray(0, standing.length).sort();
    out[step] = columnReach(positions, standing.length, options.headM, options.gapM);
  }
}

/** A vehicle speaks for the leg from `sightS` before its first point until `sightS` after it passed the stop line. */
function markPresence(set: TrackSet, i: number, options: QueueOptions, fromS: number, out: Float32Array): void {
  const first = set.offset[i];
  const end = set.offset[i + 1];
  if (first === end) return;
  let last = first;
  while (last + 1 < end && set.sM[last] > COUNT_LINE_M) last++;
  const begin = Math.ceil((set.tS[first] - options.sightS - fromS) / options.stepS - 0.5);
  const until = Math.floor((set.tS[last] + options.sightS - fromS) / options.stepS - 0.5);
  for (let step = Math.max(0, begin); step <= Math.min(out.length - 1, until); step++) out[step] = 0;
}

function dropEnded(standing: Span[], tS: number): void {
  let kept = 0;
  for (const stop of standing) if (stop.toS >= tS) standing[kept++] = stop;
  standing.length = kept;
}
