import type { TrackSet } from "./track-set";

/** Traversals are counted where they cross this virtual line past the stop line, on which nobody stands. */
export const COUNT_LINE_M = -15;

/**
 * Seconds after local midnight at which each track crosses the count line for the first time, between two
 * points along the straight line; the last point's time where a track ends before it. O(points).
 */
export function crossingTimes(set: TrackSet, lineM = COUNT_LINE_M): Float32Array {
  const out = new Float32Array(set.tracks);
  for (let i = 0; i < set.tracks; i++) out[i] = crossingOf(set, i, lineM);
  return out;
}

function crossingOf(set: TrackSet, i: number, lineM: number): number {
  const end = set.offset[i + 1];
  for (let p = set.offset[i]; p < end; p++) {
    if (set.sM[p] > lineM) continue;
    if (p === set.offset[i]) return set.tS[p];
    const share = (set.sM[p - 1] - lineM) / (set.sM[p - 1] - set.sM[p]);
    return set.tS[p - 1] + share * (set.tS[p] - set.tS[p - 1]);
  }
  return end > set.offset[i] ? set.tS[end - 1] : NaN;
}
