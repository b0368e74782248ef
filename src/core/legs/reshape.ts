import { lengthOf, slice } from "@/core/geometry/polyline";

/** Shortest leg that a vehicle can be seen to drive along, m. */
export const SHORTEST_LEG_M = 30;

/**
 * A leg's line, stop line first, with its stop line moved `shiftM` metres upstream; a negative shift carries the
 * line on straight towards the junction. Null where less than SHORTEST_LEG_M would remain. O(vertices).
 */
export function moveStopLine(line: Float64Array, shiftM: number): Float64Array | null {
  const lengthM = lengthOf(line);
  if (lengthM - shiftM < SHORTEST_LEG_M) return null;
  return slice(line, shiftM, lengthM);
}
