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
