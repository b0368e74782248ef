import { distanceM, isInside, type Point } from "../plane";
import { DISTRICTS } from "../plan/land";
import { SIDE_STREET_NAMES } from "../plan/names";
import { STREETS } from "../plan/streets";
import { buildLinks, buildMovements } from "./build-links";
import { buildStreetGraph, type StreetGraph } from "./build-graph";
import { assignCorridors } from "./corridors";
import { STREET_STANDARDS } from "./street-standards";
import type { City, CityEdge, CityNode } from "./types";

/** The small city is this part of the whole one; junctions keep their identifiers. */
export const SMALL_CITY_RING: Point[] = [[-150, -1190], [1180, -1190], [1180, 620], [-150, 620]];

export type CityScale = "demo" | "small";

export function buildCity(scale: CityScale): City {
  const graph = buildStreetGraph(STREETS, SIDE_STREET_NAMES);
  const nodes = nodesOf(graph);
  assignCorridors(nodes, graph.edges);
  const kept = scale === "small" ? clip(nodes, graph.edges) : { nodes, edges: graph.edges };
  const standards = kept.nodes.map((node) =>
    Math.max(...kept.edges.filter((edge) => edge.from === node.index || edge.to === node.index).map((edge) => STREET_STANDARDS[edge.class].setbackM)),
  );
  const links = buildLinks(kept.nodes, kept.edges, (node) => standards[node]);
  return { ...kept, links, ...buildMovements(kept.nodes, links) };
}

function nodesOf(graph: StreetGraph): CityNode[] {
  const degrees = graph.points.map((_, node) => graph.edges.filter((edge) => edge.from === node || edge.to === node).length);
  const renumbered = new Map<number, number>();
  const nodes: CityNode[] = [];
  let signals = 0;
  graph.points.forEach((point, node) => {
    if (degrees[node] === 0) return;
    const isGate = graph.isGate[node];
    if (!isGate) signals++;
    renumbered.set(node, nodes.length);
    nodes.push({
      index: nodes.length, point, isGate,
      id: isGate ? "" : `VM${String(signals).padStart(3, "0")}`,
      name: isGate ? "" : graph.names[node].slice(0, 3).join(" / "),
      district: nearestDistrict(point), corridor: "", corridorOrder: 0, inbound: [], outbound: [],
    });
  });
  for (const edge of graph.edges) {
    edge.from = renumbered.get(edge.from) ?? edge.from;
    edge.to = renumbered.get(edge.to) ?? edge.to;
  }
  return nodes;
}

function nearestDistrict(point: Point): string {
  return DISTRICTS.reduce((best, district) => (distanceM(district.centre, point) < distanceM(best.centre, point) ? district : best)).name;
}

/** Keeps the junctions inside the ring; streets that leave it end in a gate at the next junction. */
function clip(nodes: CityNode[], edges: CityEdge[]): { nodes: CityNode[]; edges: CityEdge[] } {
  const inside = nodes.map((node) => isInside(node.point, SMALL_CITY_RING));
  const kept: CityNode[] = [];
  const renumbered = new Map<number, number>();
  const keep = (node: CityNode, isGate: boolean): number => {
    kept.push({ ...node, index: kept.length, isGate, id: isGate ? "" : node.id, inbound: [], outbound: [] });
    return kept.length - 1;
  };
  nodes.forEach((node) => {
    if (inside[node.index] && !node.isGate) renumbered.set(node.index, keep(node, false));
  });
  const end = (node: number): number => renumbered.get(node) ?? keep(nodes[node], true);
  const keptEdges = edges
    .filter((edge) => renumbered.has(edge.from) || renumbered.has(edge.to))
    .map((edge) => ({ ...edge, from: end(edge.from), to: end(edge.to) }));
  return { nodes: kept, edges: keptEdges };
}
