import type { Course } from "@/core/traversals/course";
import { STOPPING } from "@/core/traversals/stops";

/** Settings of trips that begin or end inside a window. */
export const ENDS = Object.freeze({
  /** The missing part may take this much longer than a ping interval, s: else the trip did begin or end inside. */
  spareS: 0.5,
  /** A stretch that joins or leaves the network in mid-trip is completed over this distance, m. */
  joinM: 60,
  /** Below this share of free speed a vehicle counts as slowed down. */
  slowShare: 0.5,
});

/**
 * When a vehicle passed the upstream cordon, from its first ping `missingM` past it: at free speed; where that ping is
 * slow, it also braked and waited, on average for half of what is left of a ping interval. NaN where the trip must have
 * begun inside the window, since an earlier ping would have been seen otherwise.
 */
export function filledStartMs(course: Course, missingM: number, freeMs: number, intervalS: number, isTripStart: boolean): number {
  const speed = course.speedMs[0];
  const isSlow = speed < ENDS.slowShare * freeMs;
  const driveS = missingM / freeMs;
  if (!isTripStart) return isSlow || missingM > ENDS.joinM ? NaN : course.tMs[0] - driveS * 1000;
  const brakeS = isSlow ? (freeMs - speed) ** 2 / (2 * STOPPING.brakeMs2 * freeMs) : 0;
  if (driveS + brakeS > intervalS + ENDS.spareS) return NaN;
  if (!isSlow) return course.tMs[0] - driveS * 1000;
  const waitS = Math.max(0, intervalS - driveS - brakeS) / 2;
  return course.tMs[0] - (driveS + brakeS + waitS) * 1000;
}

/** When a vehicle passed the exit cordon, from its last ping `missingM` before it, speeding up to free speed. NaN as above. */
export function filledEndMs(course: Course, missingM: number, freeMs: number, intervalS: number, isTripEnd: boolean): number {
  const last = course.length - 1;
  const speed = Math.min(freeMs, Math.max(0, course.speedMs[last]));
  if (!isTripEnd && (missingM > ENDS.joinM || speed < ENDS.slowShare * freeMs)) return NaN;
  const reachM = (freeMs * freeMs - speed * speed) / (2 * STOPPING.speedUpMs2);
  const driveS =
    missingM >= reachM
      ? (freeMs - speed) / STOPPING.speedUpMs2 + (missingM - reachM) / freeMs
      : (Math.sqrt(speed * speed + 2 * STOPPING.speedUpMs2 * missingM) - speed) / STOPPING.speedUpMs2;
  return driveS > intervalS + ENDS.spareS ? NaN : course.tMs[last] + driveS * 1000;
}
