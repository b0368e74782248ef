import type { Recording } from "./recorder";

/**
 * Newell's paths change speed at once. A vehicle's real path is taken as the mean of its Newell path
 * over the last `SMOOTHING_S`: speed then changes evenly (14 m/s in 5 s is 2.8 m/s2), nobody moves
 * before the green, and since the same mean is taken of every path, order and gaps are kept.
 */
export const SMOOTHING_S = 5;

export interface Motion {
  startS: number;
  endS: number;
  /** Distance and speed at a time; times must not fall from call to call. */
  at(timeS: number): void;
  distanceM: number;
  speedMs: number;
}

export function createMotion(recording: Recording): Motion {
  const { timeS, distanceM } = recording;
  const n = timeS.length;
  const area = new Float64Array(n);
  for (let i = 1; i < n; i++) area[i] = area[i - 1] + ((distanceM[i] + distanceM[i - 1]) / 2) * (timeS[i] - timeS[i - 1]);
  const cursor = { late: 0, early: 0 };

  function advance(from: number, atS: number): number {
    let i = from;
    while (i + 1 < n && timeS[i + 1] <= atS) i++;
    return i;
  }

  function positionAt(i: number, atS: number): number {
    if (atS <= timeS[0]) return distanceM[0];
    if (i + 1 >= n) return distanceM[n - 1];
    return distanceM[i] + ((distanceM[i + 1] - distanceM[i]) * (atS - timeS[i])) / (timeS[i + 1] - timeS[i]);
  }

  function areaAt(i: number, atS: number, positionM: number): number {
    if (atS <= timeS[0]) return distanceM[0] * (atS - timeS[0]);
    return area[i] + ((distanceM[i] + positionM) / 2) * (atS - timeS[i]);
  }

  const motion: Motion = {
    startS: timeS[0], endS: timeS[n - 1], distanceM: 0, speedMs: 0,
    at(atS) {
      cursor.late = advance(cursor.late, atS);
      cursor.early = advance(cursor.early, atS - SMOOTHING_S);
      const late = positionAt(cursor.late, atS);
      const early = positionAt(cursor.early, atS - SMOOTHING_S);
      motion.speedMs = (late - early) / SMOOTHING_S;
      motion.distanceM = (areaAt(cursor.late, atS, late) - areaAt(cursor.early, atS - SMOOTHING_S, early)) / SMOOTHING_S;
    },
  };
  return motion;
}
