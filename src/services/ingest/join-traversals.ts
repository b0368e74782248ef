import type { OpenTracks, Traversals } from "@/core/types";

/** One list out of several; order is kept. O(traversals). */
export function joinTraversals(parts: readonly Traversals[]): Traversals {
  if (parts.length === 1) return parts[0];
  const length = parts.reduce((sum, part) => sum + part.length, 0);
  const points = parts.reduce((sum, part) => sum + part.trackOffset[part.length], 0);
  const joined = emptyTraversals(length, points);
  let at = 0;
  let point = 0;
  for (const part of parts) {
    for (let i = 0; i < part.length; i++) joined.trackOffset[at + i + 1] = point + part.trackOffset[i + 1];
    const trackEnd = part.trackOffset[part.length];
    joined.trackT.set(part.trackT.subarray(0, trackEnd), point);
    joined.trackS.set(part.trackS.subarray(0, trackEnd), point);
    for (const name of SCALARS) joined[name].set(part[name].subarray(0, part.length), at);
    at += part.length;
    point += trackEnd;
  }
  return joined;
}

/** The traversals for which `keep` says yes. O(traversals). */
export function filterTraversals(all: Traversals, keep: (index: number) => boolean): Traversals {
  const chosen: number[] = [];
  for (let i = 0; i < all.length; i++) if (keep(i)) chosen.push(i);
  return chosen.length === all.length ? all : pickTraversals(all, chosen);
}

/** The traversals of these indices, in their order. O(chosen track points). */
export function pickTraversals(all: Traversals, chosen: ArrayLike<number>): Traversals {
  let points = 0;
  for (let to = 0; to < chosen.length; to++) points += all.trackOffset[chosen[to] + 1] - all.trackOffset[chosen[to]];
  const some = emptyTraversals(chosen.length, points);
  for (const name of SCALARS) {
    const [from, into] = [all[name], some[name]];
    for (let to = 0; to < chosen.length; to++) into[to] = from[chosen[to]];
  }
  for (let to = 0; to < chosen.length; to++) copyTrack(all, chosen[to], some, to);
  return some;
}

/** The open tracks of these indices, in their order. O(chosen track points). */
export function pickOpenTracks(all: OpenTracks, chosen: ArrayLike<number>): OpenTracks {
  let points = 0;
  for (let to = 0; to < chosen.length; to++) points += all.trackOffset[chosen[to] + 1] - all.trackOffset[chosen[to]];
  const some: OpenTracks = {
    length: chosen.length,
    leg: Uint32Array.from(chosen, (i) => all.leg[i]),
    vehicle: Uint32Array.from(chosen, (i) => all.vehicle[i]),
    enterMs: Float64Array.from(chosen, (i) => all.enterMs[i]),
    trackOffset: new Uint32Array(chosen.length + 1),
    trackT: new Float32Array(points),
    trackS: new Float32Array(points),
  };
  for (let to = 0; to < chosen.length; to++) copyTrack(all, chosen[to], some, to);
  return some;
}

type Tracks = Pick<Traversals, "trackOffset" | "trackT" | "trackS">;

function copyTrack(all: Tracks, from: number, some: Tracks, to: number): void {
  const begin = all.trackOffset[from];
  const end = all.trackOffset[from + 1];
  some.trackT.set(all.trackT.subarray(begin, end), some.trackOffset[to]);
  some.trackS.set(all.trackS.subarray(begin, end), some.trackOffset[to]);
  some.trackOffset[to + 1] = some.trackOffset[to] + end - begin;
}

const SCALARS = [
  "movement",
  "vehicle",
  "enterMs",
  "stopLineMs",
  "exitMs",
  "delayS",
  "stops",
  "stoppedS",
  "farthestStopM",
  "flags",
] as const satisfies readonly (keyof Traversals)[];

export function emptyTraversals(length: number, points: number): Traversals {
  return {
    length,
    movement: new Uint32Array(length),
    vehicle: new Uint32Array(length),
    enterMs: new Float64Array(length),
    stopLineMs: new Float64Array(length),
    exitMs: new Float64Array(length),
    delayS: new Float32Array(length),
    stops: new Uint8Array(length),
    stoppedS: new Float32Array(length),
    farthestStopM: new Float32Array(length),
    flags: new Uint8Array(length),
    trackOffset: new Uint32Array(length + 1),
    trackT: new Float32Array(points),
    trackS: new Float32Array(points),
  };
}
