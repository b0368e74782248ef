import { distanceM, type Point } from "../plane";
import type { Street } from "../plan/streets";

/** A street passes through a cluster of crossings at a distance along its line. */
export interface Passage {
  street: number;
  alongM: number;
  point: Point;
}

interface Crossing {
  point: Point;
  a: Passage;
  b: Passage;
}

/** All places where two streets cross, gathered into clusters no wider than about twice `mergeM`. */
export function findClusters(streets: Street[], mergeM: number): Passage[][] {
  const crossings: Crossing[] = [];
  for (let i = 0; i < streets.length; i++) {
    for (let j = i + 1; j < streets.length; j++) collectCrossings(streets, i, j, crossings);
  }
  const clusters: { point: Point; passages: Passage[] }[] = [];
  for (const crossing of crossings) {
    const near = clusters.find((cluster) => distanceM(cluster.point, crossing.point) < mergeM);
    if (near) near.passages.push(crossing.a, crossing.b);
    else clusters.push({ point: crossing.point, passages: [crossing.a, crossing.b] });
  }
  return clusters.map((cluster) => cluster.passages);
}

/** Distances along the first street at which any of the others crosses it. */
export function crossingsAlong(street: Street, others: Street[]): number[] {
  const crossings: Crossing[] = [];
  others.forEach((other) => collectCrossings([street, other], 0, 1, crossings));
  return crossings.map((crossing) => crossing.a.alongM);
}

function collectCrossings(streets: Street[], i: number, j: number, out: Crossing[]): void {
  const a = streets[i].line;
  const b = streets[j].line;
  if (areApart(boxOf(a), boxOf(b))) return;
  let alongA = 0;
  for (let p = 1; p < a.length; p++) {
    const stepA = distanceM(a[p - 1], a[p]);
    if (areApart(measure([a[p - 1], a[p]]), boxOf(b))) {
      alongA += stepA;
      continue;
    }
    let alongB = 0;
    for (let q = 1; q < b.length; q++) {
      const stepB = distanceM(b[q - 1], b[q]);
      const hit = crossSegments(a[p - 1], a[p], b[q - 1], b[q]);
      if (hit) {
        const point: Point = [
          a[p - 1][0] + hit[0] * (a[p][0] - a[p - 1][0]),
          a[p - 1][1] + hit[0] * (a[p][1] - a[p - 1][1]),
        ];
        out.push({
          point,
          a: { street: i, alongM: alongA + hit[0] * stepA, point },
          b: { street: j, alongM: alongB + hit[1] * stepB, point },
        });
      }
      alongB += stepB;
    }
    alongA += stepA;
  }
}

type Box = [west: number, south: number, east: number, north: number];
const boxes = new WeakMap<readonly Point[], Box>();

function boxOf(line: readonly Point[]): Box {
  let box = boxes.get(line);
  if (!box) {
    box = measure(line);
    boxes.set(line, box);
  }
  return box;
}

function measure(line: readonly Point[]): Box {
  const box: Box = [Infinity, Infinity, -Infinity, -Infinity];
  for (const [x, y] of line) {
    box[0] = Math.min(box[0], x);
    box[1] = Math.min(box[1], y);
    box[2] = Math.max(box[2], x);
    box[3] = Math.max(box[3], y);
  }
  return box;
}

function areApart(a: Box, b: Box): boolean {
  return a[0] > b[2] || b[0] > a[2] || a[1] > b[3] || b[1] > a[3];
}

/** Shares along both segments at which they cross, half-open so that a shared vertex counts once. */
function crossSegments(a: Point, b: Point, c: Point, d: Point): [number, number] | null {
  const rx = b[0] - a[0];
  const ry = b[1] - a[1];
  const sx = d[0] - c[0];
  const sy = d[1] - c[1];
  const cross = rx * sy - ry * sx;
  if (Math.abs(cross) < 1e-9) return null;
  const t = ((c[0] - a[0]) * sy - (c[1] - a[1]) * sx) / cross;
  const u = ((c[0] - a[0]) * ry - (c[1] - a[1]) * rx) / cross;
  return t >= 0 && t < 1 && u >= 0 && u < 1 ? [t, u] : null;
}
