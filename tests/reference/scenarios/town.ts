import { createRandom } from "../random";
import { bearingDeg, signedTurnDeg } from "../plane";
import { strayOffsets } from "./grid";
import { StreetKit } from "./street-kit";
import type { NodeSpec, Scenario } from "./types";

export interface TownOptions {
  id: string;
  title: string;
  seed: number;
  columns: number;
  rows: number;
  spacingM: number;
  jitterM: number;
  /** Share of the lattice's streets left out, and share of its blocks cut by a diagonal. */
  gapShare: number;
  diagonalShare: number;
  perHour: number;
  /** Share of the crossings that have a signal; the rest give way. */
  signalShare: number;
  /** Lattice lines of one-way traffic, alternating in direction; two lanes wide. */
  oneWayColumns: number[];
  oneWayRows: number[];
  cycleS: number;
  vehicles: Scenario["vehicles"];
}

/** Two streets of one junction lie at least this far apart. */
const LEAST_ANGLE_DEG = 40;
const FRINGE_M = 290;

/** An irregular town: a bent lattice with gaps, diagonals and one-way streets, signals where three streets and more meet. */
export function townScenario(options: TownOptions): Scenario {
  const random = createRandom(options.seed);
  const kit = new StreetKit();
  const at = (i: number, j: number) => `K${i}${j}`;
  const isInside = (i: number, j: number) => i >= 0 && j >= 0 && i < options.columns && j < options.rows;
  for (let i = 0; i < options.columns; i++) {
    for (let j = 0; j < options.rows; j++) {
      const shift = () => (random.next() * 2 - 1) * options.jitterM;
      kit.node(at(i, j), i * options.spacingM + shift(), j * options.spacingM + shift(), "priority");
    }
  }
  const lanesOf = (i: number, j: number, isRow: boolean) => ((isRow ? j : i) % 3 === 1 ? 2 : 1);
  for (let i = 0; i < options.columns; i++) {
    for (let j = 0; j < options.rows; j++) {
      for (const [di, dj] of [[1, 0], [0, 1]]) {
        const isGap = random.next() < options.gapShare && lanesOf(i, j, di === 1) === 1;
        if (isInside(i + di, j + dj) && !isGap) layStreet(kit, options, at(i, j), at(i + di, j + dj), di === 1 ? { row: j } : { column: i }, lanesOf(i, j, di === 1));
      }
      if (random.next() < options.diagonalShare && isInside(i + 1, j + 1)) tryDiagonal(kit, at(i, j), at(i + 1, j + 1));
    }
  }
  const flows = addFringe(kit, options, at, lanesOf);
  const degree = (node: NodeSpec) => kit.edges.filter((edge) => edge.to === node.id).length;
  const isCrossing = (node: NodeSpec) => node.kind === "priority" && new Set([...neighbours(kit, node)]).size >= 3 && degree(node) >= 2;
  for (const node of kit.nodes) if (isCrossing(node) && random.next() < options.signalShare) node.kind = "signal";
  kit.traffic(flows, true);
  return {
    id: options.id,
    title: options.title,
    driveSide: "right",
    lat: 45.65,
    lon: -38.22,
    seed: options.seed,
    nodes: kit.nodes,
    edges: kit.edges,
    connections: kit.links("right"),
    cycleS: options.cycleS,
    leftGreenS: 7,
    turnarounds: false,
    signals: strayOffsets(kit.nodes, options.cycleS, options.seed + 1),
    demand: kit.demand,
    innerShare: 0.2,
    profile: [0.9, 1.1, 0.95],
    routeSpread: 1.4,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: 0.2,
    vehicles: options.vehicles,
  };
}

function neighbours(kit: StreetKit, node: NodeSpec): string[] {
  return kit.edges.filter((edge) => edge.to === node.id || edge.from === node.id).map((edge) => (edge.to === node.id ? edge.from : edge.to));
}

/** +1 where a lattice line runs one-way towards higher indices, -1 towards lower ones, 0 where it goes both ways. */
function directionOf(options: TownOptions, line: { row?: number; column?: number }): number {
  const place = line.row !== undefined ? options.oneWayRows.indexOf(line.row) : options.oneWayColumns.indexOf(line.column ?? -1);
  return place < 0 ? 0 : place % 2 === 0 ? 1 : -1;
}

function layStreet(kit: StreetKit, options: TownOptions, from: string, to: string, line: { row?: number; column?: number }, lanes: number) {
  const direction = directionOf(options, line);
  if (direction === 0) kit.twoWay(from, to, { lanes });
  else kit.oneWay(direction > 0 ? from : to, direction > 0 ? to : from, { lanes: 2 });
}

function tryDiagonal(kit: StreetKit, from: string, to: string) {
  const [a, b] = [from, to].map((id) => kit.nodes.find((node) => node.id === id));
  if (!a || !b) return;
  const isClear = (node: NodeSpec, other: NodeSpec) =>
    kit.edges
      .filter((edge) => edge.from === node.id)
      .every((edge) => {
        const end = kit.nodes.find((candidate) => candidate.id === edge.to);
        if (!end) return true;
        const street = bearingDeg(end.x - node.x, end.y - node.y);
        return Math.abs(signedTurnDeg(street, bearingDeg(other.x - node.x, other.y - node.y))) >= LEAST_ANGLE_DEG;
      });
  if (isClear(a, b) && isClear(b, a)) kit.twoWay(from, to, { lanes: 1 });
}

/** Streets out of the town from every second outer crossing. */
function addFringe(
  kit: StreetKit, options: TownOptions, at: (i: number, j: number) => string, lanesOf: (i: number, j: number, isRow: boolean) => number,
): Record<string, number> {
  const flows: Record<string, number> = {};
  const lead = (i: number, j: number, dx: number, dy: number, isRow: boolean) => {
    const node = kit.nodes.find((candidate) => candidate.id === at(i, j));
    if (!node) return;
    const id = kit.node(`X${i}${j}${isRow ? "r" : "c"}`, node.x + dx * FRINGE_M, node.y + dy * FRINGE_M, "end");
    const lanes = lanesOf(i, j, isRow);
    const direction = directionOf(options, isRow ? { row: j } : { column: i });
    const isInwards = direction * (dx + dy) < 0;
    if (direction === 0) kit.twoWay(id, node.id, { lanes });
    else kit.oneWay(isInwards ? id : node.id, isInwards ? node.id : id, { lanes: 2 });
    flows[id] = options.perHour * (lanes === 2 || direction !== 0 ? 2 : 1);
  };
  for (let j = 0; j < options.rows; j++) {
    if (j % 2 === 1) lead(0, j, -1, 0.12, true);
    if (j % 2 === 1 || j === 0) lead(options.columns - 1, j, 1, -0.08, true);
  }
  for (let i = 0; i < options.columns; i++) {
    if (i % 2 === 1) lead(i, 0, 0.1, -1, false);
    if (i % 2 === 1 || i === 0) lead(i, options.rows - 1, -0.06, 1, false);
  }
  return flows;
}
