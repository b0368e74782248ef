import { bearingDeg } from "@/core/geometry/angles";
import { arcLengths, keptVertices, pointAt } from "@/core/geometry/polyline";
import { MATCHING } from "@/core/match/matching";

/**
 * Straight pieces of links, side by side in one array: a ping is tested against a dozen of them, and two stand in a line
 * of the processor's cache. Columns are those of SEGMENT, of segment n at n * SEGMENT.width.
 */
export interface Segments {
  count: number;
  /** Ascending. */
  link: Int32Array;
  columns: Float32Array;
}

/** Columns of a segment; metres in the plane of its link's home junction, so that 32 bits tell a tenth of a millimetre. */
export const SEGMENT = Object.freeze({
  /** Its beginning. */
  x: 0,
  y: 1,
  /** Unit vector of travel. */
  ux: 2,
  uy: 3,
  /** Along the link. */
  lengthM: 4,
  /** Position on the link at its beginning. */
  startM: 5,
  bearingDeg: 6,
  width: 8,
});

/** A link's line, and how far it goes on straight at both ends. */
export interface LinkLine {
  line: Float64Array;
  beforeM: number;
  afterM: number;
}

/**
 * Cuts links into segments, without the vertices that lie within MATCHING.simplifyM of the rest: positions stay those of
 * the whole line, 0 at its beginning, to a few centimetres. What goes on beyond its ends are segments of their own, since a ping beside an end
 * may be judged by the freer rules of the box there. O(vertices).
 */
export function cutSegments(links: readonly LinkLine[]): Segments {
  const pieces = links.map(cutLine);
  const count = pieces.reduce((sum, { at }) => sum + at.length - 1, 0);
  const out: Segments = { count, link: new Int32Array(count), columns: new Float32Array(count * SEGMENT.width) };
  let n = 0;
  pieces.forEach(({ at, xy }, link) => {
    for (let k = 0; k + 1 < at.length; k++, n++) {
      out.link[n] = link;
      fillSegment(out.columns, n * SEGMENT.width, xy.slice(2 * k, 2 * k + 4), at[k], at[k + 1] - at[k]);
    }
  });
  return out;
}

/** Corners of a link's segments, x then y for each, and their positions. */
function cutLine({ line, beforeM, afterM }: LinkLine): { at: number[]; xy: number[] } {
  const arcs = arcLengths(line);
  const lengthM = arcs[arcs.length - 1];
  const at: number[] = beforeM > 0 ? [-beforeM] : [];
  const xy: number[] = beforeM > 0 ? [...pointAt(line, -beforeM)] : [];
  for (const vertex of keptVertices(line, MATCHING.simplifyM)) {
    at.push(arcs[vertex]);
    xy.push(line[2 * vertex], line[2 * vertex + 1]);
  }
  if (afterM > 0) {
    at.push(lengthM + afterM);
    xy.push(...pointAt(line, lengthM + afterM));
  }
  return { at, xy };
}

/** Writes the segment between two points, which runs `wayM` metres of its link. */
function fillSegment(columns: Float32Array, at: number, [x0, y0, x1, y1]: number[], startM: number, wayM: number): void {
  const length = Math.hypot(x1 - x0, y1 - y0);
  const ux = length > 0 ? (x1 - x0) / length : 0;
  const uy = length > 0 ? (y1 - y0) / length : 0;
  columns[at + SEGMENT.x] = x0;
  columns[at + SEGMENT.y] = y0;
  columns[at + SEGMENT.ux] = ux;
  columns[at + SEGMENT.uy] = uy;
  columns[at + SEGMENT.lengthM] = wayM;
  columns[at + SEGMENT.startM] = startM;
  columns[at + SEGMENT.bearingDeg] = length > 0 ? bearingDeg(ux, uy) : 0;
}
