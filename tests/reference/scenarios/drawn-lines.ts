import type { Random } from "../random";
import type { NodeSpec } from "./types";

/** A street between two nodes, both ways. */
export interface Street {
  a: NodeSpec;
  b: NodeSpec;
}

interface Point {
  x: number;
  y: number;
}

/** Whether two straight lines meet, ends that they share left out. */
export function segmentsCross(a: Point, b: Point, c: Point, d: Point): boolean {
  const side = (p: Point, q: Point, r: Point) => Math.sign((q.x - p.x) * (r.y - p.y) - (q.y - p.y) * (r.x - p.x));
  const isSame = (p: Point, q: Point) => Math.hypot(p.x - q.x, p.y - q.y) < 1;
  if (isSame(a, c) || isSame(a, d) || isSame(b, c) || isSame(b, d)) return false;
  return side(a, b, c) !== side(a, b, d) && side(c, d, a) !== side(c, d, b);
}

/** The straight lines that the streets take up, those of side streets among them. */
export function pathLines(streets: Street[], nodes: NodeSpec[]): { street: Street | null; from: Point; to: Point }[] {
  const yards = nodes.filter((node) => node.id.endsWith("y")).flatMap((end) => {
    const from = nodes.find((node) => node.id === `${end.id.slice(0, -1)}m`);
    return from ? [{ street: null, from, to: end }] : [];
  });
  return [...streets.map((street) => ({ street, from: street.a, to: street.b })), ...yards];
}

/** Streets of the shortest ways between street ends drawn at random, far ones first: what grows into a town's main streets. */
export function mainStreets(streets: Street[], ends: string[], count: number, random: Random): Set<Street> {
  const main = new Set<Street>();
  for (let n = 0; n < count && ends.length > 1; n++) {
    const from = ends[Math.floor(random.next() * ends.length)];
    const before = shortestWays(streets, from);
    const far = ends.filter((end) => before.has(end)).sort((a, b) => (before.get(b)?.lengthM ?? 0) - (before.get(a)?.lengthM ?? 0))[0];
    for (let at = before.get(far); at?.street; at = before.get(at.from)) main.add(at.street);
  }
  return main;
}

interface Reached {
  lengthM: number;
  street: Street | null;
  from: string;
}

/** Dijkstra's algorithm by scanning: towns of a hundred nodes. */
function shortestWays(streets: Street[], start: string): Map<string, Reached> {
  const open = new Map<string, Reached>([[start, { lengthM: 0, street: null, from: "" }]]);
  const done = new Map<string, Reached>();
  while (open.size > 0) {
    const [id, reached] = [...open].sort((a, b) => a[1].lengthM - b[1].lengthM)[0];
    open.delete(id);
    done.set(id, reached);
    for (const street of streets) {
      const to = street.a.id === id ? street.b : street.b.id === id ? street.a : null;
      if (!to || done.has(to.id)) continue;
      const lengthM = reached.lengthM + Math.hypot(street.a.x - street.b.x, street.a.y - street.b.y);
      const known = open.get(to.id);
      if (!known || lengthM < known.lengthM) open.set(to.id, { lengthM, street, from: id });
    }
  }
  return done;
}
