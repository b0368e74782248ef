/**
 * Reach of the standing column that hangs together with the stop line: `positions[0..count)` ascending, the first
 * within `headM`, each next within `gapM`. 0 when none hangs together. O(count).
 */
export function columnReach(positions: ArrayLike<number>, count: number, headM: number, gapM: number): number {
  let reach = 0;
  let limit = headM;
  for (let k = 0; k < count; k++) {
    if (positions[k] > limit) break;
    reach = Math.max(0, positions[k]);
    limit = reach + gapM;
  }
  return reach;
}
