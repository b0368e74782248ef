import { bearingDeg } from "@/core/geometry/angles";

/** Polylines are x then y for each vertex, metres. */
export type Polyline = Float64Array;

export function lengthOf(line: ArrayLike<number>): number {
  let length = 0;
  for (let i = 2; i < line.length; i += 2) length += Math.hypot(line[i] - line[i - 2], line[i + 1] - line[i - 1]);
  return length;
}

/** Arc length from the first vertex to each vertex. */
export function arcLengths(line: Polyline): Float64Array {
  const out = new Float64Array(line.length / 2);
  for (let i = 1; i < out.length; i++) {
    out[i] = out[i - 1] + Math.hypot(line[2 * i] - line[2 * i - 2], line[2 * i + 1] - line[2 * i - 1]);
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
    const length = Math.hypot(dx, dy);
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
  let best = Infinity;
  let at = 0;
  let offset = 0;
  let from = 0;
  for (let i = 0; i + 3 < line.length; i += 2) {
    const dx = line[i + 2] - line[i];
    const dy = line[i + 3] - line[i + 1];
    const length = Math.hypot(dx, dy);
    if (length === 0) continue;
    const px = x - line[i];
    const py = y - line[i + 1];
    const along = Math.min(length, Math.max(0, (px * dx + py * dy) / length));
    const ex = px - (along * dx) / length;
    const ey = py - (along * dy) / length;
    const distance = Math.hypot(ex, ey);
    if (distance < best) {
      best = distance;
      at = from + along;
      offset = px * dy - py * dx >= 0 ? distance : -distance;
    }
    from += length;
  }
  return { at, offset };
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
  return Math.hypot(px - share * dx, py - share * dy);
}
