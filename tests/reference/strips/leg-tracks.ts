import type { TrackSet } from "@/core/strips/track-set";

import type { CoreRun } from "../run-core";

/** Tracks of one leg's traversals, times in seconds after the start of the recording. `isSeen` picks vehicles by name. */
export function legTracks({ network, traversals, vehicles, input }: CoreRun, leg: number, isSeen: (vehicle: string) => boolean): TrackSet {
  const chosen: number[] = [];
  for (let i = 0; i < traversals.length; i++) {
    if (network.movements[traversals.movement[i]].leg === leg && isSeen(vehicles[traversals.vehicle[i]])) chosen.push(i);
  }
  const { trackOffset, trackT, trackS, enterMs } = traversals;
  const points = chosen.reduce((sum, i) => sum + trackOffset[i + 1] - trackOffset[i], 0);
  const set: TrackSet = {
    tracks: chosen.length,
    day: new Int32Array(chosen.length),
    enterS: new Float32Array(chosen.length),
    movement: new Uint32Array(chosen.length),
    delayS: new Float32Array(chosen.length),
    offset: new Uint32Array(chosen.length + 1),
    tS: new Float32Array(points),
    sM: new Float32Array(points),
  };
  let at = 0;
  chosen.forEach((i, k) => {
    set.enterS[k] = (enterMs[i] - input.truth.startMs) / 1000;
    for (let p = trackOffset[i]; p < trackOffset[i + 1]; p++, at++) {
      set.tS[at] = set.enterS[k] + trackT[p];
      set.sM[at] = trackS[p];
    }
    set.offset[k + 1] = at;
  });
  return set;
}

/** Moment at which track k first comes nearer than `sM` to the stop line; NaN where it never does. */
export function crossingS(set: TrackSet, k: number, sM: number): number {
  for (let p = set.offset[k]; p + 1 < set.offset[k + 1]; p++) {
    if (set.sM[p] < sM || set.sM[p + 1] >= sM) continue;
    const share = (set.sM[p] - sM) / (set.sM[p] - set.sM[p + 1]);
    return set.tS[p] + share * (set.tS[p + 1] - set.tS[p]);
  }
  return Number.NaN;
}
