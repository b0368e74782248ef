import { bearingDeg, signedTurnDeg } from "../plane";
import type { ConnectionSpec, EdgeSpec, NodeSpec } from "./types";

interface Out {
  edge: EdgeSpec;
  /** Positive towards the kerb side, whichever side that is. */
  kerbwardDeg: number;
}

const STRAIGHT_DEG = 40;
const U_TURN_DEG = 150;

/**
 * Lane markings for every approach of two lanes and more to a signal: the lane nearest the middle of the
 * street only for the turn across it, the kerb lane for the near turn and straight on.
 */
export function markLanes(nodes: NodeSpec[], edges: EdgeSpec[], driveSide: "left" | "right"): ConnectionSpec[] {
  const nodeById = new Map(nodes.map((node) => [node.id, node]));
  const side = driveSide === "right" ? 1 : -1;
  const links: ConnectionSpec[] = [];
  for (const edge of edges) {
    if (nodeById.get(edge.to)?.kind !== "signal") continue;
    const arriving = endStep(edge, nodeById);
    const outs = edges
      .filter((out) => out.from === edge.to)
      .map((out) => ({ edge: out, kerbwardDeg: side * signedTurnDeg(arriving, startStep(out, nodeById)) }))
      .filter((out) => Math.abs(out.kerbwardDeg) < U_TURN_DEG);
    links.push(...markApproach(edge, outs));
  }
  return links;
}

function markApproach(edge: EdgeSpec, outs: Out[]): ConnectionSpec[] {
  const last = edge.lanes - 1;
  const straightest = [...outs].sort((a, b) => Math.abs(a.kerbwardDeg) - Math.abs(b.kerbwardDeg))[0];
  const through = straightest && Math.abs(straightest.kerbwardDeg) <= STRAIGHT_DEG ? straightest : undefined;
  const near = outs.filter((out) => out !== through && out.kerbwardDeg > 0);
  const far = outs.filter((out) => out !== through && out.kerbwardDeg < 0);
  const links: ConnectionSpec[] = [];
  const link = (out: Out, fromLane: number, toLane: number) =>
    links.push({ from: edge.id, to: out.edge.id, fromLane, toLane: Math.min(out.edge.lanes - 1, Math.max(0, toLane)) });
  near.forEach((out) => link(out, 0, 0));
  const throughLast = far.length > 0 ? Math.max(0, last - 1) : last;
  if (through) for (let lane = 0; lane <= throughLast; lane++) link(through, lane, Math.min(lane, through.edge.lanes - 1));
  far.forEach((out) => link(out, last, out.edge.lanes - 1));
  return links;
}

function vertices(edge: EdgeSpec, nodes: Map<string, NodeSpec>): [number, number][] {
  const inner = edge.shape ?? [];
  return edge.ownEnds ? inner : [pointOf(nodes, edge.from), ...inner, pointOf(nodes, edge.to)];
}

function endStep(edge: EdgeSpec, nodes: Map<string, NodeSpec>): number {
  const [before, to] = vertices(edge, nodes).slice(-2);
  return bearingDeg(to[0] - before[0], to[1] - before[1]);
}

function startStep(edge: EdgeSpec, nodes: Map<string, NodeSpec>): number {
  const [from, after] = vertices(edge, nodes);
  return bearingDeg(after[0] - from[0], after[1] - from[1]);
}

function pointOf(nodes: Map<string, NodeSpec>, id: string): [number, number] {
  const node = nodes.get(id);
  if (!node) throw new RangeError(`An edge names the unknown node ${id}.`);
  return [node.x, node.y];
}

/** Shorter edges (turn bays, links inside a junction) are no place to park. */
const PARKING_M = 120;

/** Long enough edges with no street end at either end: where trips may start and end part-way. */
export function innerEdges(nodes: NodeSpec[], edges: EdgeSpec[]): string[] {
  const nodeById = new Map(nodes.map((node) => [node.id, node]));
  const isParking = (edge: EdgeSpec) => {
    const [from, to] = [nodeById.get(edge.from), nodeById.get(edge.to)];
    if (!from || !to || from.kind === "end" || to.kind === "end") return false;
    return Math.hypot(to.x - from.x, to.y - from.y) >= PARKING_M;
  };
  return edges.filter(isParking).map((edge) => edge.id);
}
