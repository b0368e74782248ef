/**
 * Reach of the standing column that hangs together with the stop line: `positions[0..count)` ascending, the first
 * within `headM`, each next within `gapM`. Up to `sureM` they are known to hang together. 0 when none does. O(count).
 */
export function columnReach(positions: ArrayLike<number>, count: number, headM: number, gapM: number, sureM = 0): number {
  let reach = 0;
  let limit = Math.max(headM, sureM);
  for (let k = 0; k < count; k++) {
    if (positions[k] > limit) break;
    reach = Math.max(0, positions[k]);
    limit = Math.max(reach + gapM, sureM);
  }
  return reach;
}
