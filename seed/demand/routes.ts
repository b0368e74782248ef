import type { City, TurnName } from "../network/types";
import { createRandomStream } from "../random";

export interface Zone {
  /** Vehicles enter on this link and leave on that one; -1 where they cannot. */
  inLink: number;
  outLink: number;
  /** Half-way along a street instead of at its open end. */
  isAccess: boolean;
  point: readonly [number, number];
  weight: number;
}

export interface Route {
  origin: number;
  destination: number;
  /** Link on which the trip starts, then the movements, then the end of the last link. */
  firstLink: number;
  lastLink: number;
  startsAtAccess: boolean;
  endsAtAccess: boolean;
  movements: number[];
}

const GATE_WEIGHT = { ring: 8, arterial: 7, street: 3, oneway: 5, local: 0.8 } as const;
const ACCESS_WEIGHT = { ring: 0, arterial: 1.2, street: 1, oneway: 1.2, local: 0.5 } as const;

export function findZones(city: City): Zone[] {
  const zones: Zone[] = [];
  for (const node of city.nodes) {
    if (!node.isGate) continue;
    const link = city.links[node.outbound[0] ?? node.inbound[0]];
    zones.push({
      inLink: node.outbound[0] ?? -1, outLink: node.inbound[0] ?? -1, isAccess: false,
      point: node.point, weight: GATE_WEIGHT[link.class],
    });
  }
  for (const link of city.links) {
    if (!link.hasAccess) continue;
    const point = link.line[link.line.length >> 1];
    zones.push({ inLink: link.index, outLink: link.index, isAccess: true, point, weight: ACCESS_WEIGHT[link.class] });
  }
  return zones;
}

const TURN_COST_S: Record<TurnName, number> = { left: 24, through: 9, right: 13 };

/** Drivers keep to the wide streets and out of the small ones beyond what time alone would say. */
const CLASS_COST = { ring: 0.9, arterial: 0.95, street: 1.05, oneway: 1.05, local: 1.45 } as const;

/** Quickest routes from one link to all others under link times that a driver misjudges by up to `spread`. */
export function routeTree(city: City, firstLink: number, spread: number, seed: number): Int32Array {
  const random = createRandomStream(seed, firstLink);
  const linkCost = city.links.map((link) => (link.lengthM / link.speedMs) * CLASS_COST[link.class] * (1 + spread * (random.next() - 0.5)));
  const cost = new Float64Array(city.links.length).fill(Infinity);
  const via = new Int32Array(city.links.length).fill(-1);
  const heap: [number, number][] = [[0, firstLink]];
  cost[firstLink] = 0;
  while (heap.length > 0) {
    const [at, link] = popSmallest(heap);
    if (at > cost[link]) continue;
    for (const index of city.movementsOf[link]) {
      const movement = city.movements[index];
      const total = at + TURN_COST_S[movement.turn] + linkCost[movement.to];
      if (total >= cost[movement.to]) continue;
      cost[movement.to] = total;
      via[movement.to] = index;
      push(heap, [total, movement.to]);
    }
  }
  return via;
}

/** Movements from the root of the tree to a link; null where there is no way or the way is its own root. */
export function movementsTo(city: City, via: Int32Array, firstLink: number, lastLink: number): number[] | null {
  const movements: number[] = [];
  let link = lastLink;
  while (link !== firstLink) {
    const movement = via[link];
    if (movement < 0) return null;
    movements.push(movement);
    link = city.movements[movement].from;
  }
  return movements.length > 0 ? movements.reverse() : null;
}

/** The way on from any link towards one destination: the next movement by link, -1 where there is none. */
export function waysTo(city: City, lastLink: number): Int32Array {
  const into: number[][] = city.links.map(() => []);
  for (const movement of city.movements) into[movement.to].push(movement.index);
  const cost = new Float64Array(city.links.length).fill(Infinity);
  const next = new Int32Array(city.links.length).fill(-1);
  const heap: [number, number][] = [[0, lastLink]];
  cost[lastLink] = 0;
  while (heap.length > 0) {
    const [at, link] = popSmallest(heap);
    if (at > cost[link]) continue;
    for (const index of into[link]) {
      const movement = city.movements[index];
      const before = city.links[movement.from];
      const total = at + TURN_COST_S[movement.turn] + (before.lengthM / before.speedMs) * CLASS_COST[before.class];
      if (total >= cost[movement.from]) continue;
      cost[movement.from] = total;
      next[movement.from] = index;
      push(heap, [total, movement.from]);
    }
  }
  return next;
}

function push(heap: [number, number][], entry: [number, number]): void {
  let i = heap.length;
  heap.push(entry);
  while (i > 0) {
    const parent = (i - 1) >> 1;
    if (heap[parent][0] <= entry[0]) break;
    heap[i] = heap[parent];
    i = parent;
  }
  heap[i] = entry;
}

function popSmallest(heap: [number, number][]): [number, number] {
  const top = heap[0];
  const entry = heap.pop() as [number, number];
  if (heap.length === 0) return top;
  let i = 0;
  for (;;) {
    let child = 2 * i + 1;
    if (child >= heap.length) break;
    if (child + 1 < heap.length && heap[child + 1][0] < heap[child][0]) child++;
    if (heap[child][0] >= entry[0]) break;
    heap[i] = heap[child];
    i = child;
  }
  heap[i] = entry;
  return top;
}
