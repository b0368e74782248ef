import { signedTurnDeg } from "@/core/geometry/angles";
import { lengthOf, pointAt, reversed } from "@/core/geometry/polyline";
import type { Network } from "@/core/types";

/** Arc from stop line to exit: the chord, bent by the turn (a circle's arc over its chord). */
export function boxWay(network: Network, leg: number, exit: number): number {
  const from = network.legs[leg];
  const to = network.exits[exit];
  const chord = Math.hypot(to.line[0] - from.line[0], to.line[1] - from.line[1]);
  const half = (Math.min(150, Math.abs(signedTurnDeg(from.bearingDeg, to.bearingDeg))) * Math.PI) / 360;
  return half < 0.02 ? chord : (chord * half) / Math.sin(half);
}

/** The way through a box as a line in the junction's plane: leg's end, a bend, exit's beginning. */
function boxLine(network: Network, leg: number, exit: number): Float64Array {
  const from = reversed(network.legs[leg].line);
  const to = network.exits[exit].line;
  const n = from.length;
  const reach = Math.hypot(to[0] - from[n - 2], to[1] - from[n - 1]) / 2;
  const [ax, ay] = pointAt(from, network.legs[leg].lengthM + reach);
  const [bx, by] = pointAt(to, -reach);
  const out: number[] = [];
  for (let k = 0; k <= 8; k++) {
    const t = k / 8;
    const cx = (ax + bx) / 2;
    const cy = (ay + by) / 2;
    out.push(
      (1 - t) ** 2 * from[n - 2] + 2 * t * (1 - t) * cx + t * t * to[0],
      (1 - t) ** 2 * from[n - 1] + 2 * t * (1 - t) * cy + t * t * to[1],
    );
  }
  return Float64Array.from(out);
}

/** The way through a junction from a leg to an exit. */
export interface Box {
  /** In the junction's plane. */
  line: Float64Array;
  lengthM: number;
  /** Index into `Network.movements`; -1 where the network has none. */
  movement: number;
}

/** Boxes by leg and exit, each worked out when it is first asked for. */
export function createBoxes(network: Network): (leg: number, exit: number) => Box {
  const keyOf = (leg: number, exit: number): number => leg * network.exits.length + exit;
  const movements = new Map(network.movements.map((movement, i) => [keyOf(movement.leg, movement.exit), i]));
  const known = new Map<number, Box>();
  return (leg, exit) => {
    const key = keyOf(leg, exit);
    let box = known.get(key);
    if (!box) {
      const line = boxLine(network, leg, exit);
      box = { line, lengthM: lengthOf(line), movement: movements.get(key) ?? -1 };
      known.set(key, box);
    }
    return box;
  };
}
