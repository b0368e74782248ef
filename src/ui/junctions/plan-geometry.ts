import type { LegView } from "@/domain/junction";

export type Point = [number, number];

/** Direction as east and north shares of one metre. */
export interface Place {
  at: Point;
  along: Point;
}

/** Point at a distance along a line from its first vertex, and the line's direction there; beyond its ends it goes straight on. */
export function placeOn(line: readonly Point[], distanceM: number): Place {
  if (line.length === 0) return { at: [0, 0], along: [0, 1] };
  if (line.length === 1) return { at: line[0], along: [0, 1] };
  let left = distanceM;
  for (let i = 0; ; i++) {
    const [x0, y0] = line[i];
    const [x1, y1] = line[i + 1];
    const length = Math.hypot(x1 - x0, y1 - y0);
    const isLast = i + 2 === line.length;
    if (left > length && !isLast) {
      left -= length;
      continue;
    }
    if (length === 0 && !isLast) continue;
    const along: Point = length > 0 ? [(x1 - x0) / length, (y1 - y0) / length] : [0, 1];
    return { at: [x0 + along[0] * left, y0 + along[1] * left], along };
  }
}

/** The line from one distance to another, its vertices between them kept. */
export function stretchOf(line: readonly Point[], fromM: number, toM: number): Point[] {
  const points: Point[] = [placeOn(line, fromM).at];
  let walked = 0;
  for (let i = 1; i < line.length; i++) {
    walked += Math.hypot(line[i][0] - line[i - 1][0], line[i][1] - line[i - 1][1]);
    if (walked > fromM && walked < toM) points.push(line[i]);
  }
  points.push(placeOn(line, toM).at);
  return points;
}

const LEAST_RADIUS_M = 110;
const MOST_RADIUS_M = 330;

/** Radius of the plan of tails: as far as the queues need, within bounds. */
export function planRadius(legs: LegView[]): number {
  const forReach = Math.max(LEAST_RADIUS_M, ...legs.map((leg) => (leg.reachP95M ?? 0) * 1.2));
  // A storage line a little farther out is worth the smaller scale, one far out is not.
  const storages = legs.map((leg) => (leg.storageM ?? 0) * 1.06).filter((storage) => storage <= 1.6 * forReach);
  return Math.min(MOST_RADIUS_M, Math.max(forReach, ...storages));
}

/** Metres to drawing units: north is up. */
export interface PlanScale {
  size: number;
  perM: number;
  x: (eastM: number) => number;
  y: (northM: number) => number;
}

export function planScale(radiusM: number, size: number, marginPx: number): PlanScale {
  const perM = (size / 2 - marginPx) / radiusM;
  return { size, perM, x: (eastM) => size / 2 + eastM * perM, y: (northM) => size / 2 - northM * perM };
}

export function pathOf(points: readonly Point[], scale: PlanScale): string {
  return points.map(([x, y], i) => `${i === 0 ? "M" : "L"}${scale.x(x).toFixed(1)} ${scale.y(y).toFixed(1)}`).join("");
}

export function lineLength(line: readonly Point[]): number {
  let length = 0;
  for (let i = 1; i < line.length; i++) length += Math.hypot(line[i][0] - line[i - 1][0], line[i][1] - line[i - 1][1]);
  return length;
}
