import { countCodes, countKnown, createHistogram, histogramQuantile } from "./code-histogram";
import { LEAST_FOR_MEDIAN, LEAST_FOR_P95 } from "./delay-level";
import { reachEstimateOf } from "./leg-level";
import { entryAt, rowOfKey } from "./rows-of-day";
import { delayOfCode, reachOfCode } from "./stored-figures";
import type { LegDetail, MovementDetail, ScoreFilter, ScreenDay } from "./types";

type Window = Pick<ScoreFilter, "fromQuarter" | "toQuarter">;

/** Median and 95th percentile of a movement's delays. O(its traversals). */
export function movementDetail(days: readonly ScreenDay[], key: number, window: Window): MovementDetail {
  const codes = createHistogram();
  let count = 0;
  for (const day of days) {
    const { from, to } = stretchOf(day.movement, key, day.movementStart, day.quarter, window);
    countCodes(codes, day.delay, from, to);
    count += to - from;
  }
  return {
    medianS: count >= LEAST_FOR_MEDIAN ? histogramQuantile(codes, count, 0.5, delayOfCode) : NaN,
    p95S: count >= LEAST_FOR_P95 ? histogramQuantile(codes, count, 0.95, delayOfCode) : NaN,
  };
}

/** Median of a leg's reaches, and the 95th percentile of those estimated with the unseen tail. O(its quarters). */
export function legDetail(days: readonly ScreenDay[], key: number, window: Window): LegDetail {
  const [seen, estimated] = [createHistogram(), createHistogram()];
  let [ofSeen, ofEstimated] = [0, 0];
  for (const day of days) {
    const { from, to } = stretchOf(day.leg, key, day.legStart, day.legQuarter, window);
    ofSeen += countKnown(seen, day.reach, from, to);
    ofEstimated += countKnown(estimated, day.reachEstimate, from, to);
  }
  return { reachP50M: histogramQuantile(seen, ofSeen, 0.5, reachOfCode), reachEstimateP95M: reachEstimateOf(estimated, ofEstimated, 0.95) };
}

/** Entries of the key's row in the window; none where the day has no such row. */
function stretchOf(keys: Uint32Array, key: number, start: Uint32Array, quarters: Uint8Array, window: Window): { from: number; to: number } {
  const row = rowOfKey(keys, key);
  if (row < 0) return { from: 0, to: 0 };
  const from = entryAt(quarters, start[row], start[row + 1], window.fromQuarter);
  return { from, to: entryAt(quarters, from, start[row + 1], window.toQuarter) };
}
