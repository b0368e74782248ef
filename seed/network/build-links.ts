import { bearingDeg, distanceM, lineBetween, lineLengthM, turnDeg, type Point } from "../plane";
import type { CityEdge, CityLink, CityMovement, CityNode, TurnName } from "./types";
import { LANE_WIDTH_M, STREET_STANDARDS } from "./street-standards";

const SHORTEST_BAY_BLOCK_M = 110;
const LONG_BLOCK_M = 230;
/** How far out of town vehicles are followed. */
const GATE_M = 520;

export function buildLinks(nodes: CityNode[], edges: CityEdge[], setbackM: (node: number) => number): CityLink[] {
  const links: CityLink[] = [];
  edges.forEach((edge, index) => {
    links.push(linkOf(links.length, edge, index, nodes, setbackM));
    if (edge.isOneWay) return;
    const back: CityEdge = { ...edge, from: edge.to, to: edge.from, line: edge.line.slice().reverse() };
    links.push(linkOf(links.length, back, index, nodes, setbackM));
  });
  for (const link of links) {
    nodes[link.from].outbound.push(link.index);
    nodes[link.to].inbound.push(link.index);
  }
  return links;
}

function linkOf(index: number, edge: CityEdge, edgeIndex: number, nodes: CityNode[], setbackM: (node: number) => number): CityLink {
  const standard = STREET_STANDARDS[edge.class];
  const fullM = lineLengthM(edge.line);
  const isToGate = nodes[edge.to].isGate;
  const startM = nodes[edge.from].isGate ? Math.max(0, fullM - GATE_M) : setbackM(edge.from);
  const inner = lineBetween(edge.line, startM, isToGate ? Math.min(fullM, GATE_M) : fullM - setbackM(edge.to));
  const besideM = edge.isOneWay ? 0 : standard.medianM + (standard.lanes * LANE_WIDTH_M) / 2;
  const line = offsetLine(inner, besideM);
  const lengthM = lineLengthM(line);
  const last = line.length - 1;
  const isGated = nodes[edge.from].isGate || isToGate;
  return {
    index, line, lengthM,
    from: edge.from, to: edge.to, street: edge.street, class: edge.class,
    startBearingDeg: bearingDeg(line[0], line[1]),
    endBearingDeg: bearingDeg(line[last - 1], line[last]),
    speedMs: standard.speedMs, lanes: standard.lanes,
    bayM: isToGate || lengthM < SHORTEST_BAY_BLOCK_M ? 0 : Math.min(standard.bayM, lengthM * 0.45),
    hasAccess: !isGated && edge.class !== "ring" && (lengthM > LONG_BLOCK_M ? edgeIndex % 3 !== 0 : lengthM > SHORTEST_BAY_BLOCK_M && edgeIndex % 2 === 0),
  };
}

/** The line moved to its right-hand side by `besideM`. */
export function offsetLine(line: readonly Point[], besideM: number): Point[] {
  return line.map((point, i) => {
    const a = line[Math.max(0, i - 1)];
    const b = line[Math.min(line.length - 1, i + 1)];
    const stepM = distanceM(a, b) || 1;
    return [point[0] + (besideM * (b[1] - a[1])) / stepM, point[1] - (besideM * (b[0] - a[0])) / stepM];
  });
}

const SHARPEST_TURN_DEG = 142;
const STRAIGHT_DEG = 50;
const TURN_SPEED_MS: Record<TurnName, number> = { left: 7.5, through: Infinity, right: 6.5 };

export function buildMovements(nodes: CityNode[], links: CityLink[]): { movements: CityMovement[]; movementsOf: number[][] } {
  const movements: CityMovement[] = [];
  const movementsOf: number[][] = links.map(() => []);
  for (const node of nodes) {
    if (node.isGate) continue;
    for (const from of node.inbound) {
      for (const movement of movementsFrom(node, links[from], links)) {
        movementsOf[from].push(movements.length);
        movements.push({ ...movement, index: movements.length });
      }
    }
  }
  return { movements, movementsOf };
}

function movementsFrom(node: CityNode, from: CityLink, links: CityLink[]): CityMovement[] {
  const exits = node.outbound
    .map((index) => links[index])
    .filter((link) => link.to !== from.from)
    .map((link) => ({ link, turn: turnDeg(from.endBearingDeg, link.startBearingDeg) }))
    .filter((exit) => Math.abs(exit.turn) <= SHARPEST_TURN_DEG);
  const straightest = exits.reduce((best, exit) => (Math.abs(exit.turn) < Math.abs(best) ? exit.turn : best), Infinity);
  return exits.map(({ link, turn }) => {
    const isThrough = turn === straightest && Math.abs(turn) <= STRAIGHT_DEG;
    const name: TurnName = isThrough ? "through" : turn < 0 ? "left" : "right";
    const line = turnPath(from, link);
    const gentle = Math.min(from.speedMs, link.speedMs);
    return {
      index: 0, node: node.index, from: from.index, to: link.index, turn: name, turnDeg: turn,
      lengthM: lineLengthM(line), line,
      speedMs: Math.min(gentle, Math.abs(turn) < 35 ? gentle : TURN_SPEED_MS[name]),
    };
  });
}

/** A quadratic curve from the stop line to the start of the next link, tangent to both where they meet ahead. */
function turnPath(from: CityLink, to: CityLink): Point[] {
  const a = from.line[from.line.length - 1];
  const b = to.line[0];
  const reachM = distanceM(a, b) / 2;
  const angleA = (from.endBearingDeg * Math.PI) / 180;
  const angleB = (to.startBearingDeg * Math.PI) / 180;
  const control: Point = [
    (a[0] + reachM * Math.sin(angleA) + b[0] - reachM * Math.sin(angleB)) / 2,
    (a[1] + reachM * Math.cos(angleA) + b[1] - reachM * Math.cos(angleB)) / 2,
  ];
  const line: Point[] = [];
  for (let i = 0; i <= 6; i++) {
    const t = i / 6;
    const [wa, wc, wb] = [(1 - t) ** 2, 2 * t * (1 - t), t * t];
    line.push([wa * a[0] + wc * control[0] + wb * b[0], wa * a[1] + wc * control[1] + wb * b[1]]);
  }
  return line;
}
