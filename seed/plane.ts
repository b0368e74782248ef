/** East and north metres from the centre of the city. */
export type Point = readonly [x: number, y: number];

export const CITY_CENTRE = { lat: 45.6, lon: -38.3 } as const;

// WGS 84: radii of curvature at the centre's latitude.
const PHI = (CITY_CENTRE.lat * Math.PI) / 180;
const E2 = (1 / 298.257223563) * (2 - 1 / 298.257223563);
const W = Math.sqrt(1 - E2 * Math.sin(PHI) ** 2);
export const METRES_PER_DEGREE_LAT = (((6378137 * (1 - E2)) / W ** 3) * Math.PI) / 180;
export const METRES_PER_DEGREE_LON = ((6378137 / W) * Math.cos(PHI) * Math.PI) / 180;

export function latOf(y: number): number {
  return CITY_CENTRE.lat + y / METRES_PER_DEGREE_LAT;
}

export function lonOf(x: number): number {
  return CITY_CENTRE.lon + x / METRES_PER_DEGREE_LON;
}

export function distanceM(a: Point, b: Point): number {
  return Math.hypot(b[0] - a[0], b[1] - a[1]);
}

/** Degrees clockwise from north, [0, 360). */
export function bearingDeg(a: Point, b: Point): number {
  return ((Math.atan2(b[0] - a[0], b[1] - a[1]) * 180) / Math.PI + 360) % 360;
}

/** Signed turn from one bearing to another, positive to the right, [-180, 180). */
export function turnDeg(fromDeg: number, toDeg: number): number {
  return ((((toDeg - fromDeg + 180) % 360) + 360) % 360) - 180;
}

export function lineLengthM(line: readonly Point[]): number {
  let sum = 0;
  for (let i = 1; i < line.length; i++) sum += distanceM(line[i - 1], line[i]);
  return sum;
}

/** The point at a distance along a line; clamped to its ends. */
export function pointAlong(line: readonly Point[], alongM: number): Point {
  let left = alongM;
  for (let i = 1; i < line.length; i++) {
    const step = distanceM(line[i - 1], line[i]);
    if (left <= step && step > 0) {
      const f = Math.max(0, left) / step;
      return [
        line[i - 1][0] + f * (line[i][0] - line[i - 1][0]),
        line[i - 1][1] + f * (line[i][1] - line[i - 1][1]),
      ];
    }
    left -= step;
  }
  return line[line.length - 1];
}

/** The part of a line between two distances along it, ends included. */
export function lineBetween(line: readonly Point[], fromM: number, toM: number): Point[] {
  const part: Point[] = [pointAlong(line, fromM)];
  let at = 0;
  for (let i = 1; i < line.length; i++) {
    at += distanceM(line[i - 1], line[i]);
    if (at > fromM + 0.5 && at < toM - 0.5) part.push(line[i]);
  }
  part.push(pointAlong(line, toM));
  return part;
}

/** Catmull-Rom curve through the points, sampled about every `stepM`. */
export function smoothLine(points: readonly Point[], stepM: number, isClosed = false): Point[] {
  const n = points.length;
  const at = (i: number): Point => (isClosed ? points[(i + n) % n] : points[Math.min(n - 1, Math.max(0, i))]);
  const out: Point[] = [];
  const spans = isClosed ? n : n - 1;
  for (let i = 0; i < spans; i++) {
    const [p0, p1, p2, p3] = [at(i - 1), at(i), at(i + 1), at(i + 2)];
    const steps = Math.max(1, Math.round(distanceM(p1, p2) / stepM));
    for (let k = 0; k < steps; k++) out.push([spline(p0, p1, p2, p3, 0, k / steps), spline(p0, p1, p2, p3, 1, k / steps)]);
  }
  out.push(at(spans));
  return out;
}

function spline(p0: Point, p1: Point, p2: Point, p3: Point, axis: 0 | 1, t: number): number {
  const [a, b, c, d] = [p0[axis], p1[axis], p2[axis], p3[axis]];
  return 0.5 * (2 * b + (c - a) * t + (2 * a - 5 * b + 4 * c - d) * t * t + (3 * b - a - 3 * c + d) * t * t * t);
}

export function isInside(point: Point, ring: readonly Point[]): boolean {
  let inside = false;
  for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) {
    const [a, b] = [ring[i], ring[j]];
    const crosses = a[1] > point[1] !== b[1] > point[1];
    if (crosses && point[0] < a[0] + ((point[1] - a[1]) * (b[0] - a[0])) / (b[1] - a[1])) inside = !inside;
  }
  return inside;
}
