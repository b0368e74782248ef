import { signedTurnDeg } from "@/core/geometry/angles";
import { boxWay } from "@/core/match/box";
import { MATCHING } from "@/core/match/matching";
import type { Network } from "@/core/types";

/**
 * Ways from the stop lines of links to the beginnings of other links, as rows of columns. The rows of one link lie side by
 * side; they are searched for when they are first asked for, and anew when they must reach farther.
 */
export interface RouteTable {
  /** Row of the cheapest way between two links, -1 where there is none of at most `mostM` metres. */
  find(from: number, to: number, mostM: number): number;
  /** Links passed on the way of a row, both ends left out, in order of travel. */
  linksOn(row: number): number[];
  /** Metres from the stop line to position 0 of the target. */
  wayM: Float64Array;
  /** Cost of the junctions passed. */
  cost: Float64Array;
}

/** The part of a street graph that ways depend on. */
export interface RouteGraph {
  network: Network;
  leg: Int32Array;
  exit: Int32Array;
  stopAt: Float64Array;
}

/** Onward links of a link, with the length and the cost of the box between them. */
interface Onward {
  link: number;
  wayM: number;
  cost: number;
}

const UTURN_DEG = 155;

/** An empty table. A search takes O(ways found x ways open); memory is some 40 bytes for each way found. */
export function createRouteTable(graph: RouteGraph): RouteTable {
  const links = graph.leg.length;
  const onward = onwardLinks(graph);
  const searchedM = new Float64Array(links).fill(-1);
  const rowAt = new Int32Array(links).fill(-1);
  const slotAt = new Int32Array(links);
  const slotMask = new Int32Array(links);
  let rows = 0;
  let slots = new Int32Array(4096);
  let slotsUsed = 0;
  let target = new Int32Array(1024);
  let previous = new Int32Array(1024);
  let junctions = new Uint8Array(1024);
  const table: RouteTable = { find, linksOn, wayM: new Float64Array(1024), cost: new Float64Array(1024) };
  return table;

  function find(from: number, to: number, mostM: number): number {
    if (searchedM[from] < Math.min(mostM, MATCHING.routeMostM)) search(from, mostM > MATCHING.routeNearM ? MATCHING.routeMostM : MATCHING.routeNearM);
    const mask = slotMask[from];
    const base = slotAt[from];
    for (let at = hashOf(to) & mask; ; at = (at + 1) & mask) {
      const row = slots[base + at] - 1;
      if (row < 0 || target[row] === to) return row;
    }
  }

  /** Dijkstra over whole links, from the stop line of one as far as `mostM`; later ways come behind the earlier ones. */
  function search(from: number, mostM: number): void {
    const first = rows;
    const open: number[] = [];
    extend(from, -1, 0, 0, 0, open);
    while (open.length > 0) {
      const row = takeNearest(open);
      const reached = table.wayM[row] + graph.stopAt[target[row]];
      if (reached > mostM || junctions[row] >= MATCHING.routeMostJunctions) continue;
      extend(target[row], row, reached, table.cost[row], junctions[row], open);
    }
    for (let row = first; row < rows; row++) rowAt[target[row]] = -1;
    indexRows(from, first);
    searchedM[from] = mostM;
  }

  function extend(link: number, row: number, wayM: number, cost: number, passed: number, open: number[]): void {
    for (const next of onward(link)) {
      const way = wayM + next.wayM;
      let at = rowAt[next.link];
      if (at < 0) {
        if (rows === target.length) growRows();
        at = rows++;
        target[at] = next.link;
        rowAt[next.link] = at;
        open.push(at);
      } else if (!(way < table.wayM[at])) continue;
      table.wayM[at] = way;
      table.cost[at] = cost + next.cost;
      previous[at] = row;
      junctions[at] = passed + 1;
    }
  }

  function takeNearest(open: number[]): number {
    let best = 0;
    for (let k = 1; k < open.length; k++) if (table.wayM[open[k]] < table.wayM[open[best]]) best = k;
    const row = open[best];
    open[best] = open[open.length - 1];
    open.length -= 1;
    return row;
  }

  function indexRows(from: number, first: number): void {
    let size = 2;
    while (size < 2 * (rows - first + 1)) size *= 2;
    if (slotsUsed + size > slots.length) slots = grown(slots, Math.max(slots.length * 2, slotsUsed + size));
    slotAt[from] = slotsUsed;
    slotMask[from] = size - 1;
    slotsUsed += size;
    for (let row = first; row < rows; row++) {
      let at = hashOf(target[row]) & (size - 1);
      while (slots[slotAt[from] + at] !== 0) at = (at + 1) & (size - 1);
      slots[slotAt[from] + at] = row + 1;
    }
  }

  function growRows(): void {
    const size = target.length * 2;
    target = grown(target, size);
    previous = grown(previous, size);
    junctions = grown(junctions, size);
    table.wayM = grown(table.wayM, size);
    table.cost = grown(table.cost, size);
  }

  function linksOn(row: number): number[] {
    const out: number[] = [];
    for (let at = previous[row]; at >= 0; at = previous[at]) out.push(target[at]);
    return out.reverse();
  }
}

/** Knuth's multiplicative hash (The Art of Computer Programming 3, 6.4). */
function hashOf(link: number): number {
  return Math.imul(link, 0x9e3779b1) >>> 16;
}

function grown<T extends Int32Array | Uint8Array | Float64Array>(from: T, size: number): T {
  const to = new (from.constructor as new (size: number) => T)(size);
  to.set(from);
  return to;
}

/** Onward links of each link, worked out once for each. */
function onwardLinks({ network, leg, exit }: RouteGraph): (link: number) => readonly Onward[] {
  const linksOfExit: number[][] = network.exits.map(() => []);
  for (let i = 0; i < exit.length; i++) if (exit[i] >= 0) linksOfExit[exit[i]].push(i);
  const exitsOfJunction: number[][] = network.junctions.map(() => []);
  network.exits.forEach((e, i) => exitsOfJunction[e.junction].push(i));
  const known: (readonly Onward[] | undefined)[] = new Array<readonly Onward[] | undefined>(leg.length);
  const listOnward = (from: number): Onward[] => {
    if (from < 0) return [];
    const drawn = network.legs[from];
    return exitsOfJunction[drawn.junction].flatMap((e) => {
      const turn = Math.abs(signedTurnDeg(drawn.bearingDeg, network.exits[e].bearingDeg));
      const cost = MATCHING.junctionCost + (turn > UTURN_DEG ? MATCHING.uturnCost : 0);
      const wayM = boxWay(network, from, e);
      return linksOfExit[e].map((link) => ({ link, wayM, cost }));
    });
  };
  return (link) => (known[link] ??= listOnward(leg[link]));
}
