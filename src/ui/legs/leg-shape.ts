import { lengthOf, projectPoint, slice } from "@/core/geometry/polyline";
import { moveStopLine } from "@/core/legs/reshape";
import type { Point } from "@/ui/junctions/plan-geometry";

/** Farthest that a stop line is moved at once, m. */
export const MOST_SHIFT_M = 60;
export const LEAST_SHIFT_M = -60;
const RAD = Math.PI / 180;

function flat(line: readonly Point[]): Float64Array {
  return Float64Array.from(line.flat());
}

function pairs(line: Float64Array): Point[] {
  const points: Point[] = [];
  for (let i = 0; i < line.length; i += 2) points.push([line[i], line[i + 1]]);
  return points;
}

/** The leg's line as it will be once its stop line is moved upstream by `shiftM`; null where too little would remain. */
export function shiftedLine(line: readonly Point[], shiftM: number): Point[] | null {
  if (shiftM === 0) return [...line];
  const moved = moveStopLine(flat(line), shiftM);
  return moved === null ? null : pairs(moved);
}

/** How far upstream of the stop line a place beside the leg lies, whole metres within what one move allows. */
export function shiftAt(line: readonly Point[], [eastM, northM]: Point): number {
  const known = flat(line);
  const longer = slice(known, -MOST_SHIFT_M, lengthOf(known));
  const at = projectPoint(longer, eastM, northM).at - MOST_SHIFT_M;
  return Math.round(Math.max(-MOST_SHIFT_M, Math.min(MOST_SHIFT_M, at)));
}

/** The next point of a drawn line: from its last one, or from the junction, along a bearing. Tenths of a metre. */
export function pointAlong(line: readonly Point[], bearingDeg: number, lengthM: number): Point {
  const [east, north] = line.at(-1) ?? [0, 0];
  return rounded([east + lengthM * Math.sin(bearingDeg * RAD), north + lengthM * Math.cos(bearingDeg * RAD)]);
}

export function rounded([east, north]: Point): Point {
  return [Math.round(east * 10) / 10, Math.round(north * 10) / 10];
}
