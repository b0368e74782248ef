import type { Traversals } from "@/core/types";

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
  let points = 0;
  for (let i = 0; i < all.length; i++) {
    if (!keep(i)) continue;
    chosen.push(i);
    points += all.trackOffset[i + 1] - all.trackOffset[i];
  }
  if (chosen.length === all.length) return all;
  const some = emptyTraversals(chosen.length, points);
  chosen.forEach((from, to) => {
    for (const name of SCALARS) some[name][to] = all[name][from];
    const begin = all.trackOffset[from];
    const end = all.trackOffset[from + 1];
    some.trackT.set(all.trackT.subarray(begin, end), some.trackOffset[to]);
    some.trackS.set(all.trackS.subarray(begin, end), some.trackOffset[to]);
    some.trackOffset[to + 1] = some.trackOffset[to] + end - begin;
  });
  return some;
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
