import type { Turn } from "@/core/types";

import { bearingDeg, signedTurnDeg } from "../plane";
import type { SimulatedNetwork, StreetEdge } from "../simulator/read-network";

const LONGEST_LEG_M = 800;
const CORDON_UP_M = 250;
const CORDON_DOWN_M = 60;
/** Streets that bend less than this at an unsignalised junction count as one street. */
const SAME_STREET_DEG = 50;
const THROUGH_DEG = 50;
const U_TURN_DEG = 150;
const ANGLE_BASE_M = 30;

export interface LegStreet {
  junctionId: string;
  /** From the stop line upstream. */
  chain: StreetEdge[];
  bearingDeg: number;
  lengthM: number;
  storageM: number | null;
  upstreamJunctionId: string | null;
  cordonUpM: number;
  exits: ExitStreet[];
}

export interface ExitStreet {
  edge: StreetEdge;
  /** Edges that follow without a signal in between, the first included. */
  chain: StreetEdge[];
  bearingDeg: number;
  signedDeg: number;
  turn: Turn;
  /** Metres past the junction's box at which a passage ends. */
  cordonDownM: number;
}

/** Every approach of every signalised junction, traced upstream along its street to the next signal. */
export function findLegStreets(network: SimulatedNetwork): LegStreet[] {
  const legs: LegStreet[] = [];
  for (const junctionId of network.signals) {
    for (const edge of network.incoming.get(junctionId) ?? []) legs.push(traceLeg(network, junctionId, edge));
  }
  return legs;
}

function traceLeg(network: SimulatedNetwork, junctionId: string, edge: StreetEdge): LegStreet {
  const chain = [edge];
  let lengthM = edge.lengthM;
  while (lengthM < LONGEST_LEG_M && !network.signals.has(chain[chain.length - 1].from)) {
    const before = straightestBefore(network, chain[chain.length - 1]);
    if (!before || chain.includes(before)) break;
    chain.push(before);
    lengthM += before.lengthM;
  }
  const upstream = chain[chain.length - 1].from;
  const storageM = network.signals.has(upstream) ? lengthM : null;
  return {
    junctionId,
    chain,
    bearingDeg: endBearing(edge),
    lengthM,
    storageM,
    upstreamJunctionId: storageM === null ? null : upstream,
    cordonUpM: Math.min(CORDON_UP_M, storageM ?? CORDON_UP_M),
    exits: findExits(network, edge),
  };
}

function straightestBefore(network: SimulatedNetwork, edge: StreetEdge): StreetEdge | undefined {
  const options = (network.incoming.get(edge.from) ?? []).filter(
    (candidate) => candidate.from !== edge.to && network.connections.has(`${candidate.id}>${edge.id}`),
  );
  return sameStreet(options, (candidate) => Math.abs(signedTurnDeg(endBearing(candidate), startBearing(edge))));
}

/** The street goes on straight, or round any bend where there is no other way. */
function sameStreet(options: StreetEdge[], bend: (candidate: StreetEdge) => number): StreetEdge | undefined {
  const straightest = [...options].sort((a, b) => bend(a) - bend(b))[0];
  return options.length === 1 || (straightest && bend(straightest) < SAME_STREET_DEG) ? straightest : undefined;
}

function findExits(network: SimulatedNetwork, edge: StreetEdge): ExitStreet[] {
  const options = (network.outgoing.get(edge.to) ?? []).filter((out) => network.connections.has(`${edge.id}>${out.id}`));
  const exits = options.map((out) => {
    const chain = followStreet(network, out);
    const lengthM = chain.reduce((sum, part) => sum + part.lengthM, 0);
    return {
      edge: out,
      chain,
      bearingDeg: startBearing(out),
      signedDeg: signedTurnDeg(endBearing(edge), startBearing(out)),
      turn: "through" as Turn,
      cordonDownM: Math.min(CORDON_DOWN_M, lengthM / 2),
    };
  });
  const straightest = [...exits].sort((a, b) => Math.abs(a.signedDeg) - Math.abs(b.signedDeg))[0];
  for (const exit of exits) {
    const angle = Math.abs(exit.signedDeg);
    if (angle >= U_TURN_DEG) exit.turn = "uturn";
    else if (exit !== straightest || angle > THROUGH_DEG) exit.turn = exit.signedDeg > 0 ? "right" : "left";
  }
  return exits;
}

function followStreet(network: SimulatedNetwork, first: StreetEdge): StreetEdge[] {
  const chain = [first];
  while (!network.signals.has(chain[chain.length - 1].to)) {
    const last = chain[chain.length - 1];
    const options = (network.outgoing.get(last.to) ?? []).filter(
      (out) => out.to !== last.from && network.connections.has(`${last.id}>${out.id}`),
    );
    const next = sameStreet(options, (out) => Math.abs(signedTurnDeg(endBearing(last), startBearing(out))));
    if (!next || chain.includes(next)) break;
    chain.push(next);
  }
  return chain;
}

/** Bearing over the last 30 m of an edge's middle lane. */
export function endBearing(edge: StreetEdge): number {
  const shape = middleLane(edge);
  const n = shape.length;
  const [x, y] = pointFromEnd(shape, ANGLE_BASE_M);
  return bearingDeg(shape[n - 2] - x, shape[n - 1] - y);
}

/** Bearing over the first 30 m of an edge's middle lane. */
export function startBearing(edge: StreetEdge): number {
  const shape = middleLane(edge);
  const [x, y] = pointFromEnd(reversed(shape), ANGLE_BASE_M);
  return bearingDeg(x - shape[0], y - shape[1]);
}

export function middleLane(edge: StreetEdge): number[] {
  return edge.lanes[Math.floor(edge.lanes.length / 2)].shape;
}

function reversed(shape: number[]): number[] {
  const out: number[] = [];
  for (let i = shape.length - 2; i >= 0; i -= 2) out.push(shape[i], shape[i + 1]);
  return out;
}

/** The point `distanceM` before the end of a polyline, or its start where it is shorter. */
function pointFromEnd(shape: number[], distanceM: number): [number, number] {
  let left = distanceM;
  for (let i = shape.length - 2; i >= 2; i -= 2) {
    const dx = shape[i - 2] - shape[i];
    const dy = shape[i - 1] - shape[i + 1];
    const step = Math.hypot(dx, dy);
    if (step >= left) return [shape[i] + (dx * left) / step, shape[i + 1] + (dy * left) / step];
    left -= step;
  }
  return [shape[0], shape[1]];
}
