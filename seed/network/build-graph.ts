import { bearingDeg, distanceM, lineBetween, lineLengthM, pointAlong, type Point } from "../plane";
import { isWater } from "../plan/land";
import type { Street } from "../plan/streets";
import { crossingsAlong, findClusters, type Passage } from "./crossings";
import type { CityEdge } from "./types";

export interface StreetGraph {
  points: Point[];
  isGate: boolean[];
  /** Names of the streets that meet, in order of first mention. */
  names: string[][];
  edges: CityEdge[];
}

const MERGE_M = 75;
/** Shorter dead ends past the last crossing are drawing overshoot, not streets. */
const STUB_M = 130;
const REACH_M = 120;
const LONGEST_BLOCK_M = 600;

interface Stop {
  node: number;
  alongM: number;
}

/** Cuts the streets where they cross: junctions, and gates where a street ends in the open. */
export function buildStreetGraph(drawn: Street[], sideNames: readonly string[]): StreetGraph {
  const graph: StreetGraph = { points: [], isGate: [], names: [], edges: [] };
  const streets = drawn.map((street) => reachOut(street, drawn));
  const stops: Stop[][] = streets.map(() => []);
  for (const cluster of findClusters(streets, MERGE_M)) {
    const node = addNode(graph, middleOf(cluster), false);
    for (const passage of cluster) {
      addName(graph.names[node], streets[passage.street].name);
      const own = stops[passage.street];
      if (!own.some((stop) => stop.node === node)) own.push({ node, alongM: passage.alongM });
    }
  }
  streets.forEach((street, index) => {
    const own = stops[index].sort((a, b) => a.alongM - b.alongM);
    addGates(graph, street, own);
    for (let i = 1; i < own.length; i++) addEdge(graph, street, own[i - 1], own[i]);
    if (street.isClosed && own.length > 2) addClosingEdge(graph, street, own);
  });
  joinCorners(graph);
  let side = 0;
  for (const edge of graph.edges.slice()) {
    if (graph.isGate[edge.from] || graph.isGate[edge.to]) continue;
    const pieces = Math.ceil(lineLengthM(edge.line) / LONGEST_BLOCK_M);
    let rest = edge;
    for (let left = pieces; left > 1; left--) {
      rest = addSideStreet(graph, rest, 1 / left, sideNames[side % sideNames.length]);
      side++;
    }
  }
  return graph;
}

/** A street that ends just short of another is drawn on until it meets it. */
function reachOut(street: Street, others: Street[]): Street {
  if (street.isClosed) return street;
  const ends = [street.line[1], street.line[0]];
  const tail = street.line.slice(-2);
  const line = [extend(ends[0], ends[1]), ...street.line, extend(tail[0], tail[1])];
  const lengthM = lineLengthM(line);
  const met = crossingsAlong({ ...street, line }, others.filter((other) => other.name !== street.name));
  const isMet = (low: number, high: number) => met.some((alongM) => alongM >= low && alongM <= high);
  const keepStart = isMet(0, REACH_M) && !isMet(REACH_M, REACH_M + STUB_M);
  const keepEnd = isMet(lengthM - REACH_M, lengthM) && !isMet(lengthM - REACH_M - STUB_M, lengthM - REACH_M);
  return { ...street, line: lineBetween(line, keepStart ? 0 : REACH_M, keepEnd ? lengthM : lengthM - REACH_M) };
}

function extend(from: Point, to: Point): Point {
  const stepM = distanceM(from, to);
  return [to[0] + ((to[0] - from[0]) * REACH_M) / stepM, to[1] + ((to[1] - from[1]) * REACH_M) / stepM];
}

/** Where two streets only meet end to end there is a bend and no junction. */
function joinCorners(graph: StreetGraph): void {
  for (let node = 0; node < graph.points.length; node++) {
    const own = graph.edges.filter((edge) => edge.from === node || edge.to === node);
    if (graph.isGate[node] || own.length !== 2 || own[0].isOneWay || own[1].isOneWay) continue;
    const [first, second] = own;
    const head = first.to === node ? first.line : first.line.slice().reverse();
    const tail = second.from === node ? second.line : second.line.slice().reverse();
    const joined: CityEdge = {
      ...first,
      from: first.to === node ? first.from : first.to,
      to: second.from === node ? second.to : second.from,
      line: [...head.slice(0, -1), ...tail],
    };
    graph.edges = graph.edges.filter((edge) => edge !== first && edge !== second);
    graph.edges.push(joined);
    graph.names[node] = [];
  }
}

function middleOf(cluster: Passage[]): Point {
  let [x, y] = [0, 0];
  for (const passage of cluster) {
    x += passage.point[0];
    y += passage.point[1];
  }
  return [x / cluster.length, y / cluster.length];
}

function addNode(graph: StreetGraph, point: Point, isGate: boolean): number {
  graph.points.push(point);
  graph.isGate.push(isGate);
  graph.names.push([]);
  return graph.points.length - 1;
}

function addName(names: string[], name: string): void {
  if (!names.includes(name)) names.push(name);
}

function addGates(graph: StreetGraph, street: Street, stops: Stop[]): void {
  if (street.isClosed || stops.length === 0) return;
  const lengthM = lineLengthM(street.line);
  if (stops[0].alongM > STUB_M) stops.unshift({ node: addNode(graph, street.line[0], true), alongM: 0 });
  if (lengthM - stops[stops.length - 1].alongM > STUB_M) {
    stops.push({ node: addNode(graph, street.line[street.line.length - 1], true), alongM: lengthM });
  }
}

function addEdge(graph: StreetGraph, street: Street, from: Stop, to: Stop): void {
  pushEdge(graph, street, from.node, to.node, lineBetween(street.line, from.alongM, to.alongM));
}

function addClosingEdge(graph: StreetGraph, street: Street, stops: Stop[]): void {
  const last = stops[stops.length - 1];
  const line = [
    ...lineBetween(street.line, last.alongM, lineLengthM(street.line)),
    ...lineBetween(street.line, 0, stops[0].alongM).slice(1),
  ];
  pushEdge(graph, street, last.node, stops[0].node, line);
}

function pushEdge(graph: StreetGraph, street: Street, from: number, to: number, line: Point[]): void {
  const bent = [graph.points[from], ...withoutEnds(line), graph.points[to]];
  graph.edges.push({ street: street.name, class: street.class, from, to, line: bent, isOneWay: street.class === "oneway" });
}

/** Vertices near the ends are dropped, so that a moved node leaves no kink. */
function withoutEnds(line: Point[]): Point[] {
  const [first, last] = [line[0], line[line.length - 1]];
  return line.slice(1, -1).filter((point) => distanceM(point, first) > 40 && distanceM(point, last) > 40);
}

/** Splits a long block by a signalised side street that ends in the open; returns the part past it. */
function addSideStreet(graph: StreetGraph, edge: CityEdge, share: number, name: string): CityEdge {
  const lengthM = lineLengthM(edge.line);
  const cutM = lengthM * share;
  const middle = pointAlong(edge.line, cutM);
  const end = openEnd(graph, edge, cutM);
  if (!end) return edge;
  const node = addNode(graph, middle, false);
  graph.names[node].push(edge.street, name);
  const gate = addNode(graph, end, true);
  const rest: CityEdge = { ...edge, from: node, line: lineBetween(edge.line, cutM, lengthM) };
  edge.line = lineBetween(edge.line, 0, cutM);
  edge.to = node;
  graph.edges.push(rest, { street: name, class: "local", from: node, to: gate, line: [middle, end], isOneWay: false });
  return rest;
}

const SIDE_STREET_M = 290;

/** The end of a side street on whichever hand has more room; null where neither has. */
function openEnd(graph: StreetGraph, edge: CityEdge, cutM: number): Point | null {
  const middle = pointAlong(edge.line, cutM);
  const along = bearingDeg(pointAlong(edge.line, cutM - 30), pointAlong(edge.line, cutM + 30));
  let best: Point | null = null;
  let bestRoomM = 60;
  for (const sideDeg of [84, -82]) {
    const angle = ((along + sideDeg) * Math.PI) / 180;
    const at = (m: number): Point => [middle[0] + m * Math.sin(angle), middle[1] + m * Math.cos(angle)];
    if ([90, 180, 290, 340].some((m) => isWater(at(m)))) continue;
    const roomM = Math.min(roomAt(graph, edge, at(140)), roomAt(graph, edge, at(SIDE_STREET_M)));
    if (roomM > bestRoomM) [best, bestRoomM] = [at(SIDE_STREET_M), roomM];
  }
  return best;
}

function roomAt(graph: StreetGraph, own: CityEdge, point: Point): number {
  let roomM = Infinity;
  for (const edge of graph.edges) {
    if (edge === own) continue;
    for (const vertex of edge.line) roomM = Math.min(roomM, distanceM(vertex, point));
  }
  return roomM;
}
