import type { TrackSet } from "@/core/strips/track-set";

export interface ToyTrack {
  day?: number;
  movement?: number;
  delayS?: number;
  enterS?: number;
  /** (seconds, metres to the stop line) pairs. */
  points: [number, number][];
}

export function setOf(tracks: ToyTrack[]): TrackSet {
  const points = tracks.flatMap((track) => track.points);
  const offset = new Uint32Array(tracks.length + 1);
  tracks.forEach((track, i) => (offset[i + 1] = offset[i] + track.points.length));
  return {
    tracks: tracks.length,
    day: Int32Array.from(tracks, (track) => track.day ?? 0),
    enterS: Float32Array.from(tracks, (track) => track.enterS ?? track.points[0]?.[0] ?? 0),
    movement: Uint32Array.from(tracks, (track) => track.movement ?? 1),
    delayS: Float32Array.from(tracks, (track) => track.delayS ?? 0),
    offset,
    tS: Float32Array.from(points, (point) => point[0]),
    sM: Float32Array.from(points, (point) => point[1]),
  };
}

export const sum = (values: ArrayLike<number>): number => Array.from(values).reduce((total, value) => total + value, 0);

export interface SignalStreet {
  lengthM: number;
  freeMs: number;
  cycleS: number;
  greenS: number;
  /** Seconds between arrivals at the upstream end. */
  headwayS: number;
  vehicles: number;
}

const STEP_S = 0.5;
const JAM_M = 7;
const REACTION_S = 1.5;

/**
 * One lane towards a signal by Newell's simplified car-following (2002): each vehicle drives free, or follows its
 * leader's path shifted by 1.5 s and 7 m, and stands at the stop line while it is red. Points every half second.
 */
export function driveStreet(street: SignalStreet, exitM = -60): ToyTrack[] {
  const lag = Math.round(REACTION_S / STEP_S);
  const tracks: ToyTrack[] = [];
  let leader: { from: number; s: number[] } | null = null;
  for (let i = 0; i < street.vehicles; i++) {
    const from = Math.round((i * street.headwayS) / STEP_S);
    const s = [street.lengthM];
    for (let k = from + 1; s[s.length - 1] > exitM; k++) {
      let next = s[s.length - 1] - street.freeMs * STEP_S;
      const ahead = leader ? leader.s[k - lag - leader.from] : undefined;
      if (ahead !== undefined) next = Math.max(next, ahead + JAM_M);
      const isRed = (k * STEP_S) % street.cycleS >= street.greenS;
      if (isRed && s[s.length - 1] >= 1 && next < 1) next = 1;
      s.push(Math.min(next, s[s.length - 1]));
    }
    tracks.push({ points: s.map((at, k): [number, number] => [(from + k) * STEP_S, at]) });
    leader = { from, s };
  }
  return tracks;
}
