import type { Course } from "@/core/traversals/course";

/** Settings of stop detection. */
export const STOPPING = Object.freeze({
  /** A stop begins below 5 km/h and ends above 10 km/h. */
  stopMs: 5 / 3.6,
  goMs: 10 / 3.6,
  /** Braking and acceleration of ordinary traffic, for stops that fall between two pings, m/s2. */
  brakeMs2: 2.6,
  speedUpMs2: 1.9,
  /** Steps longer than this may hide a stop, s. */
  hiddenFromS: 6.5,
  /** A hidden stop must explain at least this much standing, s. */
  hiddenLeastS: 2,
});

export interface StopSummary {
  stops: number;
  stoppedS: number;
  /** Smallest path distance at which the vehicle stood; NaN without a stop that was seen. */
  firstStopAtM: number;
  inferred: boolean;
  hasLongSteps: boolean;
}

/**
 * Stops between two times: speed below 5 km/h until above 10 km/h. Between pings more than 6.5 s apart a stop is
 * inferred when the step took longer than braking to a stand and speeding up again needs at free speed.
 * `standFromM` to `standToM`: the stretch of the path in which the place of a stop counts.
 */
export function summariseStops(
  course: Course, fromMs: number, toMs: number, freeSpeedMs: number, standFromM: number, standToM: number,
): StopSummary {
  const out: StopSummary = { stops: 0, stoppedS: 0, firstStopAtM: NaN, inferred: false, hasLongSteps: false };
  let isStanding = false;
  for (let i = 0; i < course.length; i++) {
    const t = course.tMs[i];
    const speed = course.speedMs[i];
    const seconds = i > 0 ? (t - course.tMs[i - 1]) / 1000 : 0;
    const isInside = t >= fromMs && t <= toMs;
    if (i > 0 && seconds > STOPPING.hiddenFromS && t >= fromMs && course.tMs[i - 1] <= toMs) {
      out.hasLongSteps = true;
      const hidden = hiddenStandS(course, i, freeSpeedMs);
      if (hidden >= STOPPING.hiddenLeastS && !isStanding && !(speed < STOPPING.stopMs)) {
        out.stops += 1;
        out.stoppedS += hidden;
        out.inferred = true;
      }
    }
    if (speed < STOPPING.stopMs) {
      const d = course.distanceM[i];
      if (d >= standFromM && d <= standToM && !(d >= out.firstStopAtM)) out.firstStopAtM = d;
      if (isInside && !isStanding) out.stops += 1;
      if (isInside && isStanding) out.stoppedS += seconds;
      isStanding = true;
    } else if (speed > STOPPING.goMs) isStanding = false;
  }
  return out;
}

/** Seconds a vehicle must have stood between pings i - 1 and i if it otherwise drove at free speed; negative when none. */
function hiddenStandS(course: Course, i: number, freeSpeedMs: number): number {
  const seconds = (course.tMs[i] - course.tMs[i - 1]) / 1000;
  const distance = course.distanceM[i] - course.distanceM[i - 1];
  const free = Math.max(freeSpeedMs, course.speedMs[i - 1] || 0, course.speedMs[i] || 0);
  const v0 = course.speedMs[i - 1] >= 0 ? course.speedMs[i - 1] : free;
  const v1 = course.speedMs[i] >= 0 ? course.speedMs[i] : free;
  const { brakeMs2, speedUpMs2 } = STOPPING;
  // Time lost against free speed: reaching it from v0, braking from it to a stand, speeding up again to v1.
  const reach = (free - v0) ** 2 / (2 * free * speedUpMs2);
  const brake = free / (2 * brakeMs2);
  const again = (free * free - (free - v1) ** 2) / (2 * free * speedUpMs2);
  return seconds - distance / free - reach - brake - again;
}
