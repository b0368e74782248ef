import type { TrackSet } from "@/core/strips/track-set";
import type { Network, Traversals } from "@/core/types";

/** One leg of one junction with one movement through it. */
export function networkOf(storageM: number): Network {
  const line = Float64Array.of(0, 0, 0, -300);
  return {
    driveSide: "right",
    junctions: [{ id: "J", lat: 0, lon: 0 }],
    legs: [
      {
        id: "L", junction: 0, name: "south", bearingDeg: 0, line, lengthM: 300, upstreamExit: -1, storageM, freeSpeedMs: 13, speedLimitMs: NaN,
        origin: "given", stopLineOrigin: "given", locked: false, support: 1, doubts: [],
      },
    ],
    exits: [{ id: "E", junction: 0, bearingDeg: 0, line, lengthM: 300, support: 1 }],
    movements: [
      { id: "L>E", leg: 0, exit: 0, turnDeg: 0, turn: "through", referenceS: 0, referenceSource: "unstopped", referenceN: 1, cordonUpM: 250, cordonDownM: 60 },
    ],
  };
}

/** The same tracks as the core's traversals, midnight being 0 ms UTC. */
export function traversalsOf(set: TrackSet): Traversals {
  const n = set.tracks;
  const starts = Array.from({ length: n }, (_, i) => set.tS[set.offset[i]]);
  const passed = starts.map((_, i) => {
    let p = set.offset[i];
    while (set.sM[p] > -15) p++;
    return set.tS[p];
  });
  return {
    length: n,
    movement: new Uint32Array(n),
    vehicle: Uint32Array.from(starts, (_, i) => i),
    enterMs: Float64Array.from(starts, (s) => s * 1000),
    stopLineMs: Float64Array.from(passed, (s) => s * 1000),
    exitMs: Float64Array.from(starts, (_, i) => set.tS[set.offset[i + 1] - 1] * 1000),
    delayS: new Float32Array(n),
    stops: new Uint8Array(n),
    stoppedS: new Float32Array(n),
    farthestStopM: new Float32Array(n).fill(NaN),
    flags: new Uint8Array(n),
    trackOffset: set.offset,
    trackT: set.tS.map((t, p) => t - starts[trackOf(set, p)]),
    trackS: set.sM,
  };
}

function trackOf(set: TrackSet, point: number): number {
  let track = 0;
  while (set.offset[track + 1] <= point) track++;
  return track;
}
