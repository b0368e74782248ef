import { NO_OPEN_TRACKS } from "@/core/traversals/open-tracks";
import type { Network, OpenTracks, Traversals } from "@/core/types";
import { QUARTER_MS, type QueueOptions } from "./options";
import type { Standings } from "./standings";

/** Spans of time in which vehicles were on a leg: entries offset[leg] to offset[leg + 1], by beginning. */
export interface Presence {
  offset: Uint32Array;
  fromMs: Float64Array;
  toMs: Float64Array;
  /** How long the vehicle speaks for the leg. */
  untilMs: Float64Array;
  /** 1 where the vehicle was lost on the leg. */
  isOpen: Uint8Array;
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

/** From the first point of the track on the leg to the stop line, or to where an open track ends. O(tracks × log). */
export function presenceByLeg(network: Network, traversals: Traversals, standings: Standings, options: QueueOptions, open: OpenTracks = NO_OPEN_TRACKS): Presence {
  const passed = traversals.length;
  const length = passed + open.length;
  const leg = Uint32Array.from({ length }, (_, i) => (i < passed ? network.movements[traversals.movement[i]].leg : open.leg[i - passed]));
  const startMs = Float64Array.from({ length }, (_, i) => (i < passed ? startOf(traversals, i) : open.enterMs[i - passed]));
  const endMs = Float64Array.from({ length }, (_, i) => (i < passed ? traversals.stopLineMs[i] : endOf(open, i - passed)));
  const untilMs = speaksUntil(standings, endMs, options);
  // Nothing is known of an open track's vehicle, and of what was behind it, after its last ping.
  for (let i = passed; i < length; i++) untilMs[i] = Math.min(untilMs[i], endMs[i]);
  const offset = new Uint32Array(network.legs.length + 1);
  for (const l of leg) offset[l + 1] += 1;
  for (let l = 0; l < network.legs.length; l++) offset[l + 1] += offset[l];
  const order = Array.from({ length }, (_, i) => i).sort((a, b) => leg[a] - leg[b] || startMs[a] - startMs[b]);
  return {
    offset,
    fromMs: Float64Array.from(order, (i) => startMs[i]),
    toMs: Float64Array.from(order, (i) => endMs[i]),
    untilMs: Float64Array.from(order, (i) => untilMs[i]),
    isOpen: Uint8Array.from(order, (i) => (i < passed ? 0 : 1)),
  };
}

function startOf(traversals: Traversals, i: number): number {
  const first = traversals.trackOffset[i];
  const leadS = first < traversals.trackOffset[i + 1] ? Math.min(0, traversals.trackT[first]) : 0;
  return traversals.enterMs[i] + leadS * 1000;
}

function endOf(open: OpenTracks, i: number): number {
  return open.enterMs[i] + open.trackT[open.trackOffset[i + 1] - 1] * 1000;
}

/** Starts of the quarters in which any vehicle came on any leg. O(spans). */
export function quartersSeen(presence: Presence): Set<number> {
  const seen = new Set<number>();
  for (const fromMs of presence.fromMs) seen.add(Math.floor(fromMs / QUARTER_MS) * QUARTER_MS);
  return seen;
}
