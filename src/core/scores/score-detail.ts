import { addCode, createHistogram, histogramQuantile } from "./code-histogram";
import { delayCodeOf, numberOf, placeOfLeg, placeOfMovement, type DayByJunction } from "./day-by-junction";
import { LEAST_FOR_MEDIAN, LEAST_FOR_P95 } from "./delay-level";
import { reachEstimateOf } from "./leg-level";
import { startAt } from "./starts";
import { delayOfCode, reachOfCode } from "./stored-figures";
import type { LegDetail, MovementDetail, ScoreFilter } from "./types";

type Window = Pick<ScoreFilter, "fromQuarter" | "toQuarter">;

/** Median and 95th percentile of a movement's delays. O(traversals of its junction). */
export function movementDetail(days: readonly DayByJunction[], key: number, { fromQuarter, toQuarter }: Window): MovementDetail {
  const codes = createHistogram();
  let count = 0;
  for (const day of days) {
    const place = placeOfMovement(day.index, key);
    const row = place ? day.rowOf[place.junction] : -1;
    if (place === undefined || row < 0) continue;
    for (let i = startAt(day.passedStart, row, fromQuarter); i < startAt(day.passedStart, row, toQuarter); i++) {
      if (numberOf(day.passed[i]) !== place.number) continue;
      addCode(codes, delayCodeOf(day.passed[i]));
      count += 1;
    }
  }
  return {
    medianS: count >= LEAST_FOR_MEDIAN ? histogramQuantile(codes, count, 0.5, delayOfCode) : NaN,
    p95S: count >= LEAST_FOR_P95 ? histogramQuantile(codes, count, 0.95, delayOfCode) : NaN,
  };
}

/** Median of a leg's reaches, and the 95th percentile of those estimated with the unseen tail. O(leg quarters of its junction). */
export function legDetail(days: readonly DayByJunction[], key: number, { fromQuarter, toQuarter }: Window): LegDetail {
  const [seen, estimated] = [createHistogram(), createHistogram()];
  let [ofSeen, ofEstimated] = [0, 0];
  for (const day of days) {
    const place = placeOfLeg(day.index, key);
    const row = place ? day.rowOf[place.junction] : -1;
    if (place === undefined || row < 0) continue;
    for (let k = startAt(day.queueStart, row, fromQuarter); k < startAt(day.queueStart, row, toQuarter); k++) {
      if (day.ofLeg[k] !== place.number) continue;
      if (day.reach[k] > 0) ofSeen += addCode(seen, day.reach[k]);
      if (day.reachEstimate[k] > 0) ofEstimated += addCode(estimated, day.reachEstimate[k]);
    }
  }
  return { reachP50M: histogramQuantile(seen, ofSeen, 0.5, reachOfCode), reachEstimateP95M: reachEstimateOf(estimated, ofEstimated, 0.95) };
}
