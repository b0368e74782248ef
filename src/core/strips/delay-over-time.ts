import { meanIntervals } from "@/core/scores/mean-intervals";
import { addToTally, clustersFor, closeDay, createTally } from "@/core/scores/ratio-tally";
import type { TrackSet } from "./track-set";

/** Mean control delay in even steps of local time; NaN where nobody passed. */
export interface DelayOverTime {
  fromS: number;
  stepS: number;
  vehicles: Uint32Array;
  meanS: Float64Array;
  lowS: Float64Array;
  highS: Float64Array;
}

/**
 * Mean delay with its 95 % interval in steps of time, by the method of the scores. A track belongs to the step
 * in which it crosses the count line (`crossingS`); `include`, where given, holds 1 for each track that counts.
 * Steps of 900 s from a whole quarter give the figures of the day profile. O(tracks + steps).
 */
export function delayOverTime(set: TrackSet, crossingS: Float32Array, fromS: number, toS: number, stepS: number, include?: Uint8Array): DelayOverTime {
  const steps = Math.max(0, Math.ceil((toS - fromS) / stepS));
  const days = set.day.reduce((count, day, i) => count + (i === 0 || day !== set.day[i - 1] ? 1 : 0), 0);
  const tally = createTally(steps, clustersFor(days));
  const sumSq = new Float64Array(steps);
  const vehicles = new Uint32Array(steps);
  for (let i = 0; i < set.tracks; i++) {
    if (i > 0 && set.day[i] !== set.day[i - 1]) closeDay(tally);
    const step = Math.floor((crossingS[i] - fromS) / stepS);
    const counts = step >= 0 && step < steps && !(include && include[i] === 0);
    if (!counts) continue;
    addToTally(tally, step, 1, set.delayS[i]);
    sumSq[step] += set.delayS[i] ** 2;
    vehicles[step] += 1;
  }
  closeDay(tally);
  const intervals = meanIntervals(tally, sumSq, new Uint8Array(steps));
  return { fromS, stepS, vehicles, meanS: intervals.value, lowS: intervals.low, highS: intervals.high };
}
