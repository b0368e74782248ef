import { createRandom } from "../random";
import { innerEdges, markLanes } from "./connections";
import type { EdgeSpec, NodeSpec, Scenario, SignalSpec } from "./types";

export interface GridOptions {
  columnsX: number[];
  rowsY: number[];
  /** Length of the streets that lead out of the grid, metres. */
  fringeM: number;
  /** Junctions are moved by up to this much in either axis, metres. */
  jitterM: number;
  rotationDeg: number;
  seed: number;
  lanes: (axis: "column" | "row", index: number) => number;
  speedMs: number;
}

interface GridStreets {
  nodes: NodeSpec[];
  edges: EdgeSpec[];
  /** Edges that lead into the grid from outside, by the axis and index of their street. */
  entries: { id: string; axis: "column" | "row"; index: number }[];
  exits: { id: string; axis: "column" | "row"; index: number }[];
}

/** A rectangular net of two-way streets with signals at every crossing and street ends all round. */
export function gridStreets(options: GridOptions): GridStreets {
  const { columnsX, rowsY, fringeM } = options;
  const random = createRandom(options.seed);
  const angle = (options.rotationDeg * Math.PI) / 180;
  const nodes: NodeSpec[] = [];
  const place = (id: string, x: number, y: number, kind: NodeSpec["kind"]) => {
    const jx = kind === "signal" ? (random.next() * 2 - 1) * options.jitterM : 0;
    const jy = kind === "signal" ? (random.next() * 2 - 1) * options.jitterM : 0;
    nodes.push({
      id,
      x: (x + jx) * Math.cos(angle) - (y + jy) * Math.sin(angle),
      y: (x + jx) * Math.sin(angle) + (y + jy) * Math.cos(angle),
      kind,
    });
  };
  columnsX.forEach((x, i) => rowsY.forEach((y, j) => place(`J${i}${j}`, x, y, "signal")));
  columnsX.forEach((x, i) => {
    place(`S${i}`, x, rowsY[0] - fringeM, "end");
    place(`N${i}`, x, rowsY[rowsY.length - 1] + fringeM, "end");
  });
  rowsY.forEach((y, j) => {
    place(`W${j}`, columnsX[0] - fringeM, y, "end");
    place(`E${j}`, columnsX[columnsX.length - 1] + fringeM, y, "end");
  });
  const streets: GridStreets = { nodes, edges: [], entries: [], exits: [] };
  columnsX.forEach((_, i) => addStreet(streets, options, "column", i, [`S${i}`, ...rowsY.map((_, j) => `J${i}${j}`), `N${i}`]));
  rowsY.forEach((_, j) => addStreet(streets, options, "row", j, [`W${j}`, ...columnsX.map((_, i) => `J${i}${j}`), `E${j}`]));
  return streets;
}

function addStreet(streets: GridStreets, options: GridOptions, axis: "column" | "row", index: number, chain: string[]) {
  const lanes = options.lanes(axis, index);
  const last = chain.length - 2;
  for (let k = 0; k <= last; k++) {
    for (const [from, to] of [[chain[k], chain[k + 1]], [chain[k + 1], chain[k]]]) {
      const id = `${from}_${to}`;
      streets.edges.push({ id, from, to, lanes, speedMs: options.speedMs });
      if ((k === 0 && from === chain[0]) || (k === last && from === chain[last + 1])) streets.entries.push({ id, axis, index });
      if ((k === 0 && to === chain[0]) || (k === last && to === chain[last + 1])) streets.exits.push({ id, axis, index });
    }
  }
}

/** Offsets without any plan: what an unattended grid ends up with. */
export function strayOffsets(nodes: NodeSpec[], cycleS: number, seed: number): Record<string, SignalSpec> {
  const random = createRandom(seed);
  const signals: Record<string, SignalSpec> = {};
  for (const node of nodes) {
    if (node.kind === "signal") signals[node.id] = { offsetS: Math.floor(random.next() * cycleS) };
  }
  return signals;
}

export function gridScenario(): Scenario {
  const streets = gridStreets({
    columnsX: [0, 170, 420, 640],
    rowsY: [0, 240, 400, 740],
    fringeM: 300,
    jitterM: 14,
    rotationDeg: 17,
    seed: 11,
    lanes: (axis, index) => (axis === "row" && index % 3 === 1 ? 3 : index === 3 ? 1 : 2),
    speedMs: 13.89,
  });
  const signals = strayOffsets(streets.nodes, 90, 12);
  // J11 gives its cross street too little green: queues fill the short blocks behind it.
  signals.J11.greens = [{ from: "J10_J11", dir: "s", factor: 0.65 }];
  const perLane = (axis: "column" | "row", index: number) => (axis === "row" && index === 1 ? 780 : index === 3 ? 150 : 340);
  return {
    id: "grid",
    title: "4 x 4 grid, right-hand driving, stray offsets, one street oversaturated with spillback",
    driveSide: "right",
    lat: 45.6,
    lon: -38.3,
    seed: 101,
    nodes: streets.nodes,
    edges: streets.edges,
    connections: markLanes(streets.nodes, streets.edges, "right"),
    cycleS: 90,
    leftGreenS: 8,
    turnarounds: false,
    signals,
    demand: [
      {
        entries: Object.fromEntries(streets.entries.map(({ id, axis, index }) => [id, perLane(axis, index)])),
        exits: Object.fromEntries(streets.exits.map(({ id, axis, index }) => [id, perLane(axis, index)])),
        inner: innerEdges(streets.nodes, streets.edges),
      },
    ],
    innerShare: 0.12,
    profile: [0.85, 1.1, 0.9],
    routeSpread: 1.3,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: 1,
    vehicles: "calm",
  };
}
