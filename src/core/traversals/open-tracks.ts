import type { OpenTracks } from "@/core/types";

export interface OpenTrackBuilder {
  /** Adds a track of `points` pairs of ms and s. */
  add(leg: number, vehicle: number, trackMs: Float64Array, trackS: Float64Array, points: number): void;
  finish(): OpenTracks;
}

/** A track needs two points to tell of a movement. */
const LEAST_POINTS = 2;

export function createOpenTrackBuilder(): OpenTrackBuilder {
  const leg: number[] = [];
  const vehicle: number[] = [];
  const enterMs: number[] = [];
  const offset: number[] = [0];
  const seconds: number[] = [];
  const places: number[] = [];
  return {
    add(onLeg, byVehicle, trackMs, trackS, points) {
      if (points < LEAST_POINTS) return;
      leg.push(onLeg);
      vehicle.push(byVehicle);
      enterMs.push(trackMs[0]);
      for (let n = 0; n < points; n++) {
        seconds.push((trackMs[n] - trackMs[0]) / 1000);
        places.push(trackS[n]);
      }
      offset.push(seconds.length);
    },
    finish: () => ({
      length: leg.length,
      leg: Uint32Array.from(leg),
      vehicle: Uint32Array.from(vehicle),
      enterMs: Float64Array.from(enterMs),
      trackOffset: Uint32Array.from(offset),
      trackT: Float32Array.from(seconds),
      trackS: Float32Array.from(places),
    }),
  };
}

/** One list out of several, of those for which `keep` says yes by leg; order is kept. O(points). */
export function joinOpenTracks(parts: readonly OpenTracks[], keep: (leg: number) => boolean = () => true): OpenTracks {
  const joined = createOpenTrackBuilder();
  for (const part of parts) {
    for (let i = 0; i < part.length; i++) {
      if (!keep(part.leg[i])) continue;
      const [from, to] = [part.trackOffset[i], part.trackOffset[i + 1]];
      const trackMs = Float64Array.from(part.trackT.subarray(from, to), (t) => part.enterMs[i] + t * 1000);
      joined.add(part.leg[i], part.vehicle[i], trackMs, Float64Array.from(part.trackS.subarray(from, to)), to - from);
    }
  }
  return joined.finish();
}

/** For callers that have none. */
export const NO_OPEN_TRACKS: OpenTracks = createOpenTrackBuilder().finish();
