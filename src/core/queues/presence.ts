import type { Network, Traversals } from "@/core/types";
import { QUARTER_MS, type QueueOptions } from "./options";
import type { Standings } from "./standings";

/** Spans of time in which vehicles were on a leg: entries offset[leg] to offset[leg + 1], by beginning. */
export interface Presence {
  offset: Uint32Array;
  fromMs: Float64Array;
  toMs: Float64Array;
  /** How long the vehicle speaks for the leg. */
  untilMs: Float64Array;
}

/**
 * Until when each vehicle speaks for what is behind it: beyond `toMs` for as long as it can be seen from. One that had
 * to stand again after moving up leaves standing vehicles behind, of whom it tells nothing once it drives off.
 * O(vehicles + standings).
 */
export function speaksUntil(standings: Standings, toMs: ArrayLike<number>, options: QueueOptions): Float64Array {
  const until = Float64Array.from(toMs, (ms) => ms + options.sightS * 1000);
  for (let k = 0; k < standings.length; k++) {
    if (standings.joinedMs[k] < standings.fromMs[k]) until[standings.traversal[k]] = standings.toMs[k];
  }
  return until;
}

/** From the first point of the track on the leg to the stop line. O(traversals × log). */
export function presenceByLeg(network: Network, traversals: Traversals, standings: Standings, options: QueueOptions): Presence {
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
  const untilMs = speaksUntil(standings, traversals.stopLineMs, options);
  const order = Array.from({ length }, (_, i) => i).sort((a, b) => legOf(a) - legOf(b) || startOf[a] - startOf[b]);
  return {
    offset,
    fromMs: Float64Array.from(order, (i) => startOf[i]),
    toMs: Float64Array.from(order, (i) => traversals.stopLineMs[i]),
    untilMs: Float64Array.from(order, (i) => untilMs[i]),
  };
}

/** Starts of the quarters in which any vehicle came on any leg. O(spans). */
export function quartersSeen(presence: Presence): Set<number> {
  const seen = new Set<number>();
  for (const fromMs of presence.fromMs) seen.add(Math.floor(fromMs / QUARTER_MS) * QUARTER_MS);
  return seen;
}
