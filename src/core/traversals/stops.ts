import { KNOTS, type Course } from "@/core/traversals/course";

/** Settings of stop detection. */
export const STOPPING = Object.freeze({
  /** A stop begins below 5 km/h and ends above 10 km/h. */
  stopMs: 5 / 3.6,
  goMs: 10 / 3.6,
  /** Braking and acceleration of ordinary traffic, for stops that fall between two pings, m/s2. */
  brakeMs2: 2.6,
  speedUpMs2: 1.9,
  /** Steps between pings longer than this may hide a stop, s. */
  hiddenFromS: 6.5,
});

export interface StopSummary {
  stops: number;
  stoppedS: number;
  /** Smallest path distance at which the vehicle stood; NaN without a stop whose place is known. */
  firstStopAtM: number;
  inferred: boolean;
  hasLongSteps: boolean;
}

/**
 * Stops between two times on a course whose gaps are filled (see fillGaps): speed below 5 km/h until above 10 km/h.
 * `standFromM` to `standToM`: the stretch of the path in which the place of a stop counts. O(log n + points between).
 */
export function summariseStops(course: Course, fromMs: number, toMs: number, standFromM: number, standToM: number): StopSummary {
  const out: StopSummary = { stops: 0, stoppedS: 0, firstStopAtM: NaN, inferred: false, hasLongSteps: false };
  let isStanding = false;
  let lastPing = -1;
  for (let i = whereDecided(course, fromMs, standFromM); i < course.length; i++) {
    const t = course.tMs[i];
    const d = course.distanceM[i];
    const isPing = course.kind[i] === KNOTS.ping;
    const isInside = t >= fromMs && t <= toMs;
    if (isPing) {
      const isLong = lastPing >= 0 && t - course.tMs[lastPing] > STOPPING.hiddenFromS * 1000;
      if (isLong && t >= fromMs && course.tMs[lastPing] <= toMs) out.hasLongSteps = true;
      lastPing = i;
    }
    if (course.speedMs[i] < STOPPING.stopMs) {
      const isPlaced = course.kind[i] !== KNOTS.unplaced && d >= standFromM && d <= standToM;
      if (isPlaced && !(d >= out.firstStopAtM)) out.firstStopAtM = d;
      if (isInside && !isStanding) {
        out.stops += 1;
        if (!isPing) out.inferred = true;
      }
      if (isStanding && i > 0) out.stoppedS += overlapS(course.tMs[i - 1], t, fromMs, toMs);
      isStanding = true;
    } else if (course.speedMs[i] > STOPPING.goMs) isStanding = false;
    if (isPing && t > toMs && d > standToM) break;
  }
  return out;
}

/** A ping before the window and the stretch, from which on it shows by itself whether the vehicle stands when it comes in. */
function whereDecided({ tMs, distanceM, speedMs, kind, length }: Course, fromMs: number, standFromM: number): number {
  let low = 0;
  let high = length;
  // Invariant: all before `low` lie before the window and the stretch; `high` and what follows do not.
  while (low < high) {
    const mid = (low + high) >> 1;
    if (tMs[mid] < fromMs && distanceM[mid] < standFromM) low = mid + 1;
    else high = mid;
  }
  let at = low - 1;
  while (at > 0 && !(kind[at] === KNOTS.ping && speedMs[at] > STOPPING.goMs)) at -= 1;
  return Math.max(0, at);
}

function overlapS(aMs: number, bMs: number, fromMs: number, toMs: number): number {
  return Math.max(0, Math.min(bMs, toMs) - Math.max(aMs, fromMs)) / 1000;
}
