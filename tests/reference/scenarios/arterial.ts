import { innerEdges, markLanes } from "./connections";
import type { ConnectionSpec, EdgeSpec, NodeSpec, Scenario } from "./types";

interface CrossStreet {
  /** Position along the main street and its sideways bend, metres. */
  x: number;
  y: number;
  /** Angle from the main street to the cross street, degrees; 90 crosses squarely. */
  skewDeg: number;
  sides: ("north" | "south")[];
  lanes: number;
  perHour: number;
}

const BAY_M = 75;
const SIDE_M = 330;

export interface ArterialOptions {
  crossings: CrossStreet[];
  mainPerHour: number;
  mainSpeedMs: number;
}

/** A main street of two lanes each way with turn bays at every signal, and the streets that cross it. */
export function arterialStreets({ crossings, mainPerHour, mainSpeedMs }: ArterialOptions) {
  const nodes: NodeSpec[] = crossings.map(({ x, y }, k) => ({ id: `A${k}`, x, y, kind: "signal" }));
  const last = crossings[crossings.length - 1];
  nodes.unshift({ id: "W", x: crossings[0].x - 420, y: crossings[0].y - 30, kind: "end" });
  nodes.push({ id: "E", x: last.x + 420, y: last.y + 45, kind: "end" });
  const chain = [...nodes];
  const edges: EdgeSpec[] = [];
  const links: ConnectionSpec[] = [];
  const entries: Record<string, number> = {};
  const exits: Record<string, number> = {};
  const street = (from: NodeSpec, to: NodeSpec, lanes: number, speedMs: number, perHour: number) => {
    const first = to.kind === "signal" ? addWithBay(nodes, edges, links, from, to, lanes, speedMs) : addPlain(edges, from, to, lanes, speedMs);
    if (from.kind === "end") entries[first] = perHour;
    if (to.kind === "end") exits[first] = perHour;
  };
  for (let k = 0; k + 1 < chain.length; k++) {
    street(chain[k], chain[k + 1], 2, mainSpeedMs, mainPerHour);
    street(chain[k + 1], chain[k], 2, mainSpeedMs, mainPerHour * 0.8);
  }
  crossings.forEach((crossing, k) => {
    const junction = chain[k + 1];
    for (const side of crossing.sides) {
      const angle = ((side === "north" ? crossing.skewDeg : crossing.skewDeg + 180) * Math.PI) / 180;
      const end: NodeSpec = {
        id: `${side === "north" ? "N" : "S"}${k}`,
        x: crossing.x + SIDE_M * Math.cos(angle),
        y: crossing.y + SIDE_M * Math.sin(angle),
        kind: "end",
      };
      nodes.push(end);
      street(end, junction, crossing.lanes, 13.89, crossing.perHour);
      street(junction, end, crossing.lanes, 13.89, crossing.perHour);
    }
  });
  return { nodes, edges, links, entries, exits };
}

function addPlain(edges: EdgeSpec[], from: NodeSpec, to: NodeSpec, lanes: number, speedMs: number): string {
  const id = `${from.id}_${to.id}`;
  edges.push({ id, from: from.id, to: to.id, lanes, speedMs });
  return id;
}

/** Splits the street before the signal and adds a bay lane at the middle of the road; on short streets the bay is as long as the street. */
function addWithBay(
  nodes: NodeSpec[], edges: EdgeSpec[], links: ConnectionSpec[], from: NodeSpec, to: NodeSpec, lanes: number, speedMs: number,
): string {
  const lengthM = Math.hypot(to.x - from.x, to.y - from.y);
  if (lengthM < 2.5 * BAY_M) return addPlain(edges, from, to, lanes + 1, speedMs);
  const part = 1 - BAY_M / lengthM;
  const bay: NodeSpec = {
    id: `b${from.id}_${to.id}`, x: from.x + part * (to.x - from.x), y: from.y + part * (to.y - from.y), kind: "priority",
  };
  nodes.push(bay);
  const first = addPlain(edges, from, bay, lanes, speedMs);
  const second = addPlain(edges, bay, to, lanes + 1, speedMs);
  for (let lane = 0; lane < lanes; lane++) links.push({ from: first, to: second, fromLane: lane, toLane: lane });
  links.push({ from: first, to: second, fromLane: lanes - 1, toLane: lanes });
  return first;
}

export function arterialScenario(): Scenario {
  const streets = arterialStreets({
    mainPerHour: 760,
    mainSpeedMs: 16.67,
    crossings: [
      { x: 0, y: 0, skewDeg: 90, sides: ["north", "south"], lanes: 1, perHour: 220 },
      { x: 330, y: 22, skewDeg: 62, sides: ["north", "south"], lanes: 1, perHour: 340 },
      { x: 425, y: 25, skewDeg: 95, sides: ["south"], lanes: 1, perHour: 190 },
      { x: 820, y: -20, skewDeg: 48, sides: ["north", "south"], lanes: 1, perHour: 220 },
      { x: 1060, y: -8, skewDeg: 100, sides: ["north"], lanes: 1, perHour: 190 },
      { x: 1600, y: 60, skewDeg: 128, sides: ["north", "south"], lanes: 2, perHour: 340 },
      { x: 1810, y: 75, skewDeg: 84, sides: ["north", "south"], lanes: 1, perHour: 190 },
    ],
  });
  const cycleS = 100;
  const signals: Scenario["signals"] = {};
  for (const node of streets.nodes.filter(({ kind }) => kind === "signal")) {
    signals[node.id] = { offsetS: Math.round(node.x / 14) % cycleS };
  }
  // A4 runs half a cycle off the others; A5's westbound left turn gets a few seconds of green.
  signals.A4.offsetS = (signals.A4.offsetS ?? 0) + 50;
  signals.A5.greens = [{ from: "bA6_A5_A5", dir: "l", factor: 0.5 }];
  return {
    id: "arterial",
    title: "arterial with irregular spacing, skewed side streets, turn bays, a starved left turn and a bad offset",
    driveSide: "right",
    lat: 45.62,
    lon: -38.27,
    seed: 202,
    nodes: streets.nodes,
    edges: streets.edges,
    connections: [...streets.links, ...markLanes(streets.nodes, streets.edges, "right")],
    cycleS,
    leftGreenS: 9,
    turnarounds: false,
    signals,
    demand: [{ entries: streets.entries, exits: streets.exits, inner: innerEdges(streets.nodes, streets.edges) }],
    relations: [{ from: "E_bE_A6", to: "A5_S5", perHour: 70 }],
    innerShare: 0.1,
    profile: [0.9, 1.1, 0.95],
    routeSpread: 1,
    warmUpS: 480,
    recordedS: 3600,
    recordedShare: 0.2,
    vehicles: "calm",
  };
}

/** Another street, kept aside, mirrored by the caller. */
export function arterialBScenario(): { scenario: Scenario; bays: ConnectionSpec[] } {
  const streets = arterialStreets({
    mainPerHour: 820,
    mainSpeedMs: 13.89,
    crossings: [
      { x: 0, y: 0, skewDeg: 75, sides: ["north", "south"], lanes: 1, perHour: 220 },
      { x: 250, y: -15, skewDeg: 90, sides: ["north"], lanes: 1, perHour: 180 },
      { x: 560, y: 10, skewDeg: 135, sides: ["north", "south"], lanes: 1, perHour: 200 },
      { x: 690, y: 30, skewDeg: 92, sides: ["north", "south"], lanes: 1, perHour: 170 },
      { x: 1180, y: -40, skewDeg: 58, sides: ["south"], lanes: 1, perHour: 210 },
      { x: 1420, y: -35, skewDeg: 105, sides: ["north", "south"], lanes: 2, perHour: 300 },
    ],
  });
  const base = arterialScenario();
  const signals: Scenario["signals"] = {};
  for (const node of streets.nodes.filter(({ kind }) => kind === "signal")) signals[node.id] = { offsetS: Math.round(node.x / 9) % 90 };
  signals.A2.greens = [{ from: "bA1_A2_A2", dir: "s", factor: 0.8 }];
  const scenario: Scenario = {
    ...base, seed: 707, lat: 45.57, lon: -38.2, nodes: streets.nodes, edges: streets.edges, cycleS: 90, signals,
    connections: [...streets.links, ...markLanes(streets.nodes, streets.edges, "right")],
    demand: [{ entries: streets.entries, exits: streets.exits, inner: innerEdges(streets.nodes, streets.edges) }],
    relations: [], vehicles: "default",
  };
  return { scenario, bays: streets.links };
}
