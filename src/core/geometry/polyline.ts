import { bearingDeg } from "@/core/geometry/angles";

/** Polylines are x then y for each vertex, metres. */
export type Polyline = Float64Array;

export function lengthOf(line: ArrayLike<number>): number {
  let length = 0;
  for (let i = 2; i < line.length; i += 2) length += stepOf(line, i);
  return length;
}

/** From the vertex before to the one whose x stands at i. Math.hypot is many times slower than a root. */
function stepOf(line: ArrayLike<number>, i: number): number {
  const dx = line[i] - line[i - 2];
  const dy = line[i + 1] - line[i - 1];
  return Math.sqrt(dx * dx + dy * dy);
}

/** Arc length from the first vertex to each vertex. */
export function arcLengths(line: Polyline): Float64Array {
  const out = new Float64Array(line.length / 2);
  for (let i = 1; i < out.length; i++) {
    out[i] = out[i - 1] + stepOf(line, 2 * i);
  }
  return out;
}

/** The point at arc length `at`; before the first and past the last vertex the end segments go on straight. */
export function pointAt(line: Polyline, at: number): [number, number] {
  const last = line.length / 2 - 1;
  if (last < 1) return [line[0], line[1]];
  let from = 0;
  for (let i = 0; i < last; i++) {
    const dx = line[2 * i + 2] - line[2 * i];
    const dy = line[2 * i + 3] - line[2 * i + 1];
    const length = Math.sqrt(dx * dx + dy * dy);
    if (at <= from + length || i === last - 1) {
      const share = length > 0 ? (at - from) / length : 0;
      return [line[2 * i] + share * dx, line[2 * i + 1] + share * dy];
    }
    from += length;
  }
  return [line[0], line[1]];
}

/** Bearing of the chord between two arc lengths, along the direction of drawing. */
export function chordBearingDeg(line: Polyline, from: number, to: number): number {
  const [x0, y0] = pointAt(line, from);
  const [x1, y1] = pointAt(line, to);
  return bearingDeg(x1 - x0, y1 - y0);
}

export function reversed(line: Polyline): Polyline {
  const out = new Float64Array(line.length);
  for (let i = 0; i < line.length; i += 2) {
    out[i] = line[line.length - 2 - i];
    out[i + 1] = line[line.length - 1 - i];
  }
  return out;
}

/** The piece between two arc lengths (`from` < `to`); ends may lie beyond the line, which then goes on straight. */
export function slice(line: Polyline, from: number, to: number): Polyline {
  const arcs = arcLengths(line);
  const out: number[] = [...pointAt(line, from)];
  for (let i = 0; i < arcs.length; i++) {
    if (arcs[i] > from + 1e-6 && arcs[i] < to - 1e-6) out.push(line[2 * i], line[2 * i + 1]);
  }
  out.push(...pointAt(line, to));
  return Float64Array.from(out);
}

export interface Projection {
  /** Arc length of the foot of the perpendicular. */
  at: number;
  /** Distance from the line, positive to the right of the direction of drawing. */
  offset: number;
}

/** Nearest point of a polyline, O(vertices). The end segments are not prolonged. */
export function projectPoint(line: Polyline, x: number, y: number): Projection {
  return projectWithin(line, x, y, 0, 0, line.length / 2 - 1);
}

/**
 * Nearest point of the part of a polyline within `reachM` of the arc length `at`; `arcs` are the line's arcLengths.
 * O(log vertices + vertices within reach).
 */
export function projectNear(line: Polyline, arcs: Float64Array, x: number, y: number, at: number, reachM: number): Projection {
  const last = arcs.length - 1;
  let low = 0;
  let high = last;
  // Invariant: the vertex `low` lies before the part, or is the first.
  while (low + 1 < high) {
    const mid = (low + high) >> 1;
    if (arcs[mid] <= at - reachM) low = mid;
    else high = mid;
  }
  let end = low + 1;
  while (end < last && arcs[end] < at + reachM) end += 1;
  return projectWithin(line, x, y, arcs[low], low, end);
}

/** Nearest point between two vertices, the first of them at arc length `from`. */
function projectWithin(line: Polyline, x: number, y: number, from: number, first: number, last: number): Projection {
  let best2 = Infinity;
  let at = from;
  let offset = 0;
  for (let i = 2 * first; i < 2 * last; i += 2) {
    const dx = line[i + 2] - line[i];
    const dy = line[i + 3] - line[i + 1];
    const length = Math.sqrt(dx * dx + dy * dy);
    if (length === 0) continue;
    const px = x - line[i];
    const py = y - line[i + 1];
    const along = Math.min(length, Math.max(0, (px * dx + py * dy) / length));
    const ex = px - (along * dx) / length;
    const ey = py - (along * dy) / length;
    const distance2 = ex * ex + ey * ey;
    if (distance2 < best2) {
      best2 = distance2;
      at = from + along;
      offset = px * dy - py * dx >= 0 ? 1 : -1;
    }
    from += length;
  }
  return { at, offset: best2 < Infinity ? offset * Math.sqrt(best2) : 0 };
}

/** Douglas and Peucker's simplification: no dropped vertex lies farther than `toleranceM` from the result. */
export function simplify(line: Polyline, toleranceM: number): Polyline {
  const out: number[] = [];
  for (const i of keptVertices(line, toleranceM)) out.push(line[2 * i], line[2 * i + 1]);
  return out.length < line.length ? Float64Array.from(out) : line;
}

/**
 * Numbers of the vertices, ascending, that Douglas and Peucker's simplification keeps (Algorithms for the Reduction of
 * the Number of Points Required to Represent a Digitized Line, 1973). The first and the last always stay. O(n log n) as a rule.
 */
export function keptVertices(line: Polyline, toleranceM: number): number[] {
  const count = line.length / 2;
  const keep = new Uint8Array(count);
  keep[0] = keep[count - 1] = 1;
  const stack = [0, count - 1];
  while (stack.length > 0) {
    const last = stack.pop() as number;
    const first = stack.pop() as number;
    let far = -1;
    let farthest = toleranceM;
    for (let i = first + 1; i < last; i++) {
      const distance = distanceToSegment(line, first, last, i);
      if (distance > farthest) {
        farthest = distance;
        far = i;
      }
    }
    if (far >= 0) {
      keep[far] = 1;
      stack.push(first, far, far, last);
    }
  }
  const out: number[] = [];
  for (let i = 0; i < count; i++) if (keep[i]) out.push(i);
  return out;
}

function distanceToSegment(line: Polyline, first: number, last: number, i: number): number {
  const dx = line[2 * last] - line[2 * first];
  const dy = line[2 * last + 1] - line[2 * first + 1];
  const px = line[2 * i] - line[2 * first];
  const py = line[2 * i + 1] - line[2 * first + 1];
  const length2 = dx * dx + dy * dy;
  const share = length2 > 0 ? Math.min(1, Math.max(0, (px * dx + py * dy) / length2)) : 0;
  const ex = px - share * dx;
  const ey = py - share * dy;
  return Math.sqrt(ex * ex + ey * ey);
}
