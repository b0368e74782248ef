import type { Network, OpenTracks, Traversals } from "@/core/types";
import { NO_OPEN_TRACKS } from "@/core/traversals/open-tracks";
import type { QueueOptions } from "./options";

/** Where and when vehicles stood on legs, as columns in order of leg, then of time. */
export interface Standings {
  length: number;
  leg: Uint32Array;
  /** Index of the traversal; open tracks count on behind the traversals. */
  traversal: Uint32Array;
  /** Distance from the stop line, metres. */
  s: Float32Array;
  fromMs: Float64Array;
  toMs: Float64Array;
  /** When the vehicle joined the queue in which it stands: the beginning of its first stop there. */
  joinedMs: Float64Array;
  /** 1 where the vehicle moved up in this queue: it belongs to one, whoever else was seen. */
  isQueuing: Uint8Array;
  /** By how much its place may be too far, metres. */
  doubtM: Float32Array;
}

/** One stop: where, and from when to when. */
export interface Stop {
  s: number;
  fromMs: number;
  toMs: number;
}

export interface Standing extends Stop {
  leg: number;
  traversal: number;
  joinedMs: number;
  isQueuing: boolean;
  doubtM: number;
}

/** A ping that tells of standing nearer than this to a stop seen in the track is that stop. */
const SAME_STOP_M = 8;
/** Length given to a stop that only one ping saw. */
const SHORT_STOP_MS = 5000;

/**
 * Stops on the leg, read off the tracks with hysteresis: below 5 km/h until above 10 km/h; and the place where the
 * vehicle's own speed told of standing, which catches short stops at the tail between two pings. Vehicles that stand
 * past the stop line (waiting to turn) or at the upstream junction's box (waiting there to turn) are not this leg's
 * queue and are left out; so is the last stop of an open track, unless its vehicle was queuing. O(track points + standings × log).
 */
export function findStandings(network: Network, traversals: Traversals, options: QueueOptions, open: OpenTracks = NO_OPEN_TRACKS): Standings {
  const found: Standing[] = [];
  for (let i = 0; i < traversals.length; i++) {
    const leg = network.movements[traversals.movement[i]].leg;
    const stops = stopsOfTrack(traversals, i, options);
    addStandings(found, [...stops, ...slowPing(traversals, i, stops)], leg, i, network.legs[leg].storageM, options);
  }
  for (let i = 0; i < open.length; i++) {
    const own: Standing[] = [];
    addStandings(own, stopsOfTrack(open, i, options), open.leg[i], traversals.length + i, network.legs[open.leg[i]].storageM, options);
    found.push(...own.filter((standing) => standing.isQueuing || movedOn(open, i, standing, options)));
  }
  return standingsOf(found);
}

/** Whether a vehicle drove on along the leg after a stop: where it was last seen it may have parked. */
function movedOn(open: OpenTracks, i: number, standing: Standing, options: QueueOptions): boolean {
  return open.trackS[open.trackOffset[i + 1] - 1] < standing.s - options.jamSpacingM;
}

/**
 * Keeps the stops of one track that belong to the leg's queue. A vehicle that stands again within the column's memory
 * and gap moved up in the queue that it had joined before.
 */
export function addStandings(out: Standing[], stops: Stop[], leg: number, traversal: number, storageM: number, options: QueueOptions): void {
  const farthest = storageM > 0 ? storageM : Infinity;
  let queue: Standing[] = [];
  let stoodMs = 0;
  for (const stop of [...stops].sort((a, b) => a.fromMs - b.fromMs)) {
    if (stop.s < -options.pastLineM || stop.s > farthest) continue;
    const last = queue.at(-1);
    const isSameQueue = last && stop.fromMs - last.toMs <= options.memoryS * 1000 && last.s - stop.s <= options.gapM;
    if (!isSameQueue) queue = [];
    queue.push({ leg, traversal, ...stop, joinedMs: queue.length > 0 ? queue[0].joinedMs : stop.fromMs, isQueuing: false, doubtM: options.doubtM });
    out.push(queue[queue.length - 1]);
    stoodMs = (isSameQueue ? stoodMs : 0) + stop.toMs - stop.fromMs;
    const isQueuing = stoodMs >= options.queuingS * 1000 && queue[0].s - stop.s >= options.jamSpacingM;
    if (isQueuing) for (const standing of queue) Object.assign(standing, { isQueuing, doubtM: 0 });
  }
}

/** Sorts in place, then copies to columns. */
export function standingsOf(found: Standing[]): Standings {
  found.sort((a, b) => a.leg - b.leg || a.fromMs - b.fromMs || a.s - b.s);
  return columnsOf(found);
}

/** The part of traversals that stops are read off. */
export type TrackColumns = Pick<Traversals, "enterMs" | "trackOffset" | "trackT" | "trackS">;

/** Stops along one track: median position, first and last moment. O(points of the track). */
export function stopsOfTrack(t: TrackColumns, i: number, options: QueueOptions): Stop[] {
  const stops: Stop[] = [];
  const end = t.trackOffset[i + 1];
  let first = -1;
  for (let p = t.trackOffset[i]; p + 1 < end; p++) {
    const seconds = t.trackT[p + 1] - t.trackT[p];
    if (!(seconds > 0)) continue;
    const speed = (t.trackS[p] - t.trackS[p + 1]) / seconds;
    if (first < 0 && speed < options.stopSpeedMs) first = p;
    const goes = speed > options.goSpeedMs;
    const closes = first >= 0 && (goes || p + 2 === end);
    if (!closes) continue;
    const last = goes ? p : p + 1;
    const fromS = t.trackT[first];
    const toS = t.trackT[last];
    if (toS - fromS >= options.minStopS) {
      stops.push({ s: medianOf(t.trackS, first, last), fromMs: t.enterMs[i] + fromS * 1000, toMs: t.enterMs[i] + toS * 1000 });
    }
    first = -1;
  }
  return stops;
}

/** The moment of the track that stands for `farthestStopM`, unless a stop already does. */
function slowPing(t: Traversals, i: number, stops: { s: number }[]): Stop[] {
  const s = t.farthestStopM[i];
  if (!(s >= 0) || stops.some((stop) => stop.s > s - SAME_STOP_M)) return [];
  let nearest = t.trackOffset[i];
  for (let p = nearest; p < t.trackOffset[i + 1]; p++) {
    if (Math.abs(t.trackS[p] - s) < Math.abs(t.trackS[nearest] - s)) nearest = p;
  }
  if (nearest === t.trackOffset[i + 1]) return [];
  const atMs = t.enterMs[i] + t.trackT[nearest] * 1000;
  return [{ s, fromMs: atMs - SHORT_STOP_MS / 2, toMs: atMs + SHORT_STOP_MS / 2 }];
}

function medianOf(values: Float32Array, first: number, last: number): number {
  const sorted = values.slice(first, last + 1).sort();
  const middle = (sorted.length - 1) / 2;
  return (sorted[Math.floor(middle)] + sorted[Math.ceil(middle)]) / 2;
}

function columnsOf(found: Standing[]): Standings {
  return {
    length: found.length,
    leg: Uint32Array.from(found, (f) => f.leg),
    traversal: Uint32Array.from(found, (f) => f.traversal),
    s: Float32Array.from(found, (f) => f.s),
    fromMs: Float64Array.from(found, (f) => f.fromMs),
    toMs: Float64Array.from(found, (f) => f.toMs),
    joinedMs: Float64Array.from(found, (f) => f.joinedMs),
    isQueuing: Uint8Array.from(found, (f) => (f.isQueuing ? 1 : 0)),
    doubtM: Float32Array.from(found, (f) => f.doubtM),
  };
}

/** Standings of leg l: entries result[l] to result[l + 1]. O(standings + legs). */
export function standingsByLeg(standings: Standings, legs: number): Uint32Array {
  const offset = new Uint32Array(legs + 1);
  for (let k = 0; k < standings.length; k++) offset[standings.leg[k] + 1] += 1;
  for (let leg = 0; leg < legs; leg++) offset[leg + 1] += offset[leg];
  return offset;
}
