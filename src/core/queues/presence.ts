import type { Network, Traversals } from "@/core/types";
import { QUARTER_MS } from "./options";

/** Spans of time in which vehicles were on a leg: entries offset[leg] to offset[leg + 1], by beginning. */
export interface Presence {
  offset: Uint32Array;
  fromMs: Float64Array;
  toMs: Float64Array;
}

/** From the first point of the track on the leg to the stop line. O(traversals × log). */
export function presenceByLeg(network: Network, traversals: Traversals): Presence {
  const { length } = traversals;
  const legOf = (i: number): number => network.movements[traversals.movement[i]].leg;
  const startOf = new Float64Array(length);
  const offset = new Uint32Array(network.legs.length + 1);
  for (let i = 0; i < length; i++) {
    const first = traversals.trackOffset[i];
    const leadS = first < traversals.trackOffset[i + 1] ? Math.min(0, traversals.trackT[first]) : 0;
    startOf[i] = traversals.enterMs[i] + leadS * 1000;
    offset[legOf(i) + 1] += 1;
  }
  for (let leg = 0; leg < network.legs.length; leg++) offset[leg + 1] += offset[leg];
  const order = Array.from({ length }, (_, i) => i).sort((a, b) => legOf(a) - legOf(b) || startOf[a] - startOf[b]);
  return {
    offset,
    fromMs: Float64Array.from(order, (i) => startOf[i]),
    toMs: Float64Array.from(order, (i) => traversals.stopLineMs[i]),
  };
}

/** Starts of the quarters in which any vehicle came on any leg. O(spans). */
export function quartersSeen(presence: Presence): Set<number> {
  const seen = new Set<number>();
  for (const fromMs of presence.fromMs) seen.add(Math.floor(fromMs / QUARTER_MS) * QUARTER_MS);
  return seen;
}
