import type { DriveSide } from "@/core/types";

import { createRandom } from "../random";
import type { Random } from "../random";
import { innerEdges } from "./connections";
import { mainStreets, pathLines, segmentsCross } from "./drawn-lines";
import type { Street } from "./drawn-lines";
import type { BusLine, Dressed, DrawnStreets, EdgeSpec, Generated, NodeSpec, Scenario } from "./types";

export interface DrawnCityOptions extends Omit<Generated, "dress"> {
  id: string;
  title: string;
  seed: number;
  driveSide: DriveSide;
  cycleS: number;
  /** Vehicles per hour and lane that come in by a street end, and by a yard or side street. */
  perLane: number;
  perYard: number;
  mainStreets: number;
  /** Share of the outer crossings from which one more street leads out of town. */
  fringeShare: number;
  /** Shares of the smaller streets: one-way, with a yard or side street half-way. */
  oneWayShare: number;
  yardShare: number;
  busLines: number;
  vehicles: Scenario["vehicles"];
  recordedShare: number;
}

const SPEEDS_MS = [8.33, 11.11, 13.89];
const MAIN_SPEEDS_MS = [13.89, 16.67];
/** A street out of town is at least this long, so that its queue and its cordon fit on it. */
const FRINGE_M = 310;
const YARD_M = 80;
const SPLIT_FROM_M = 130;
const BEND_FROM_M = 110;

/** A city whose streets the simulator's own generator draws: bent, of mixed widths and speeds, with yards, buses and errands between the signals. */
export function drawnCityScenario(options: DrawnCityOptions): Scenario {
  return {
    id: options.id,
    title: options.title,
    driveSide: options.driveSide,
    lat: 45.55,
    lon: -38.41,
    seed: options.seed,
    nodes: [],
    edges: [],
    cycleS: options.cycleS,
    leftGreenS: 6,
    turnarounds: false,
    demand: [],
    innerShare: 0.18,
    profile: [0.9, 1.1, 0.95],
    routeSpread: 1.4,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: options.recordedShare,
    vehicles: options.vehicles,
    generated: { ...options, dress: (drawn) => dressCity(options, drawn) },
  };
}

function dressCity(options: DrawnCityOptions, drawn: DrawnStreets): Dressed {
  const random = createRandom(options.seed);
  const nodes = drawn.nodes.map((node): NodeSpec => ({ ...node, kind: "priority" }));
  const streets = undirected(drawn, nodes);
  addFringe(options, nodes, streets, random);
  const ends = leadOut(nodes, streets);
  const main = mainStreets(streets, ends.map((node) => node.id), options.mainStreets, random);
  const edges: EdgeSpec[] = [];
  const flows: Record<string, number> = {};
  const lay = (from: NodeSpec, to: NodeSpec, like: EdgeSpec, shape?: [number, number][]) => {
    edges.push({ ...like, id: `${from.id}_${to.id}`, from: from.id, to: to.id, shape });
  };
  for (const street of streets) {
    const isMain = main.has(street);
    const isOut = [street.a, street.b].some((node) => node.kind === "end");
    const speeds = isMain ? MAIN_SPEEDS_MS : SPEEDS_MS;
    const lanes = isMain ? (random.next() < 0.3 ? 3 : 2) : random.next() < 0.2 ? 2 : 1;
    const like = { id: "", from: "", to: "", lanes, speedMs: speeds[Math.floor(random.next() * speeds.length)], priority: isMain ? 9 : 4 };
    const isOneWay = !isMain && !isOut && random.next() < options.oneWayShare && hasOtherWays(street, streets);
    const { middle, bow } = middleOf(street, random);
    const isSplit = !isOut && middle !== null && random.next() < options.yardShare;
    const yard = isSplit ? addYard(street, middle, nodes, streets, random) : null;
    if (yard) {
      for (const [from, to] of [[street.a, yard.at], [yard.at, street.b]]) {
        lay(from, to, like);
        if (!isOneWay) lay(to, from, like);
      }
      const small = { ...like, lanes: 1, speedMs: 8.33, priority: 1 };
      lay(yard.at, yard.end, small);
      lay(yard.end, yard.at, small);
      flows[yard.end.id] = options.perYard;
    } else {
      lay(street.a, street.b, like, bow);
      if (!isOneWay) lay(street.b, street.a, like, bow && [...bow].reverse());
    }
    for (const node of [street.a, street.b]) if (node.kind === "end") flows[node.id] = options.perLane * lanes * (isMain ? 1.3 : 1);
  }
  const entries = Object.fromEntries(edges.filter((edge) => edge.from in flows).map((edge) => [edge.id, flows[edge.from]]));
  const exits = Object.fromEntries(edges.filter((edge) => edge.to in flows).map((edge) => [edge.id, flows[edge.to]]));
  const buses = drawBuses(options, edges, nodes, main, random);
  return { nodes, edges, demand: [{ entries, exits, inner: innerEdges(nodes, edges) }], buses };
}

/** Every street once, whichever of its directions was drawn first. */
function undirected(drawn: DrawnStreets, nodes: NodeSpec[]): Street[] {
  const byId = new Map(nodes.map((node) => [node.id, node]));
  const seen = new Map<string, Street>();
  for (const edge of drawn.edges) {
    const [a, b] = [edge.from, edge.to].sort().map((id) => byId.get(id));
    if (a && b && a !== b) seen.set(`${a.id} ${b.id}`, { a, b });
  }
  return [...seen.values()];
}

/** Streets out of town, away from its middle, from crossings on its outside. */
function addFringe(options: DrawnCityOptions, nodes: NodeSpec[], streets: Street[], random: Random) {
  const middle = { x: mean(nodes.map((node) => node.x)), y: mean(nodes.map((node) => node.y)) };
  for (const node of [...nodes]) {
    const outM = Math.hypot(node.x - middle.x, node.y - middle.y);
    if (outM === 0 || random.next() >= options.fringeShare) continue;
    const end: NodeSpec = {
      id: `${node.id}x`, kind: "priority",
      x: node.x + (FRINGE_M * (node.x - middle.x)) / outM, y: node.y + (FRINGE_M * (node.y - middle.y)) / outM,
    };
    if (streets.some((street) => segmentsCross(node, end, street.a, street.b))) continue;
    nodes.push(end);
    streets.push({ a: node, b: end });
  }
}

const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;

/** Makes street ends of the nodes with one street: moved outwards until the street is long enough. Those that would cut others stay blind alleys. */
function leadOut(nodes: NodeSpec[], streets: Street[]): NodeSpec[] {
  const ends: NodeSpec[] = [];
  for (const node of nodes) {
    const own = streets.filter((street) => street.a === node || street.b === node);
    if (own.length !== 1) continue;
    const from = own[0].a === node ? own[0].b : own[0].a;
    const lengthM = Math.hypot(node.x - from.x, node.y - from.y);
    const scale = Math.max(1, FRINGE_M / lengthM);
    const moved = { x: from.x + scale * (node.x - from.x), y: from.y + scale * (node.y - from.y) };
    const isClear = streets.every((street) => street === own[0] || !segmentsCross(from, moved, street.a, street.b));
    if (!isClear) continue;
    Object.assign(node, moved, { kind: "end" });
    ends.push(node);
  }
  return ends;
}

/** One direction may go where both ends keep two streets and more for the other way round. */
function hasOtherWays(street: Street, streets: Street[]): boolean {
  return [street.a, street.b].every((node) => streets.filter((other) => other.a === node || other.b === node).length >= 4);
}

/** Streets of some length bow to one side; their middle is where a side street may join. */
function middleOf(street: Street, random: Random): { middle: { x: number; y: number } | null; bow: [number, number][] | undefined } {
  const { a, b } = street;
  const lengthM = Math.hypot(b.x - a.x, b.y - a.y);
  const side = (random.next() < 0.5 ? -1 : 1) * (0.03 + 0.07 * random.next());
  const at = 0.38 + 0.24 * random.next();
  const place = (along: number, aside: number): [number, number] => [
    a.x + along * (b.x - a.x) + aside * (b.y - a.y), a.y + along * (b.y - a.y) - aside * (b.x - a.x),
  ];
  const [x, y] = place(at, side * 0.6);
  const bow = lengthM >= BEND_FROM_M ? [place(0.3, 0.84 * side), place(0.5, side), place(0.7, 0.84 * side)] : undefined;
  return { middle: lengthM >= SPLIT_FROM_M ? { x, y } : null, bow };
}

function addYard(street: Street, middle: { x: number; y: number }, nodes: NodeSpec[], streets: Street[], random: Random): { at: NodeSpec; end: NodeSpec } | null {
  const { a, b } = street;
  const lengthM = Math.hypot(b.x - a.x, b.y - a.y);
  const first = random.next() < 0.5 ? 1 : -1;
  for (const side of [first, -first]) {
    const end = { x: middle.x + (side * YARD_M * (b.y - a.y)) / lengthM, y: middle.y - (side * YARD_M * (b.x - a.x)) / lengthM };
    if (pathLines(streets, nodes).some((line) => line.street !== street && segmentsCross(middle, end, line.from, line.to))) continue;
    const added = [{ id: `${a.id}.${b.id}m`, ...middle, kind: "priority" as const }, { id: `${a.id}.${b.id}y`, ...end, kind: "end" as const }];
    nodes.push(...added);
    return { at: added[0], end: added[1] };
  }
  return null;
}

/** Lines along the main streets: from one of their ends over the main edges that follow, with a stop before every second crossing. */
function drawBuses(options: DrawnCityOptions, edges: EdgeSpec[], nodes: NodeSpec[], main: Set<Street>, random: Random): BusLine[] {
  const isEnd = new Set(nodes.filter((node) => node.kind === "end").map((node) => node.id));
  const isMain = (edge: EdgeSpec) => edge.priority === 9;
  const starts = edges.filter((edge) => isEnd.has(edge.from) && isMain(edge));
  const lines: BusLine[] = [];
  for (let n = 0; n < options.busLines && starts.length > 0 && main.size > 0; n++) {
    const chain = [starts[Math.floor(random.next() * starts.length)]];
    for (;;) {
      const last = chain[chain.length - 1];
      const next = edges.filter((edge) => edge.from === last.to && edge.to !== last.from && isMain(edge) && !chain.includes(edge));
      if (next.length === 0) break;
      chain.push(next[Math.floor(random.next() * next.length)]);
    }
    const byId = new Map(nodes.map((node) => [node.id, node]));
    const lengthOf = (edge: EdgeSpec) => {
      const [from, to] = [byId.get(edge.from), byId.get(edge.to)];
      return from && to ? Math.hypot(to.x - from.x, to.y - from.y) : 0;
    };
    const stops = chain.slice(0, -1).flatMap((edge, k) => (k % 2 === n % 2 && lengthOf(edge) > 90 ? [{ edge: edge.id, beforeEndM: 25 + 25 * random.next() }] : []));
    if (stops.length > 0) lines.push({ from: chain[0].id, to: chain[chain.length - 1].id, stops, everyS: 300 });
  }
  return lines;
}
