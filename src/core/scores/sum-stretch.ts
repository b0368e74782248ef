import { COARSE_SHIFT, type CodeHistogram } from "./code-histogram";
import { COARSE_FROM, delayTicks, TICKS_PER_S, ZERO_DELAY } from "./stored-figures";
import type { ScreenDay } from "./types";

/** Sums over some traversals; the same object is filled again and again. */
export interface DelaySums {
  vehicles: number;
  delayS: number;
  /** Sum of squares, s². */
  delaySq: number;
  stops: number;
  stopped: number;
}

export function emptySums(): DelaySums {
  return { vehicles: 0, delayS: 0, delaySq: 0, stops: 0, stopped: 0 };
}

/** Sums over entries `from` to `to`, which are also counted in the histogram. Whole numbers throughout: no rounding. O(to - from). */
export function sumStretch({ delay, stops }: ScreenDay, from: number, to: number, { fine, coarse }: CodeHistogram, sums: DelaySums): void {
  let ticks = 0;
  let squares = 0;
  let allStops = 0;
  let moving = 0;
  for (let i = from; i < to; i++) {
    let code = delay[i];
    fine[code] += 1;
    coarse[code >> COARSE_SHIFT] += 1;
    if (code >= COARSE_FROM) code = delayTicks(code);
    ticks += code;
    squares += code * code;
    allStops += stops[i];
    if (stops[i] === 0) moving += 1;
  }
  const vehicles = to - from;
  sums.vehicles = vehicles;
  sums.delayS = (ticks - ZERO_DELAY * vehicles) / TICKS_PER_S;
  sums.delaySq = (squares - 2 * ZERO_DELAY * ticks + ZERO_DELAY * ZERO_DELAY * vehicles) / (TICKS_PER_S * TICKS_PER_S);
  sums.stops = allStops;
  sums.stopped = vehicles - moving;
}
