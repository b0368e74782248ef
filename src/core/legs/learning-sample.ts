import type { ClaimIndex, JunctionIndex } from "@/core/index/junction-index";
import { learningPings, LEARNING_SAMPLE } from "@/core/legs/learning";
import { sampleTrips } from "@/core/pings/sample-trips";
import type { Trips } from "@/core/pings/trips";
import type { JunctionPoint } from "@/core/types";

/** Places looked at to tell how many are near a junction. */
const LOOKS = 20_000;

/** Whole trips, evenly over all hours, as many as learningPings asks for near junctions; all where they are no more. O(pings kept + trips). */
export function learningSample(trips: Trips, junctions: readonly JunctionPoint[], index: JunctionIndex): Trips {
  const wanted = learningPings(junctions.length, trips.medianIntervalS);
  return trips.length <= wanted ? trips : sampleTrips(trips, wanted / nearShare(trips, junctions, index));
}

/**
 * Share of the pings that lie within LEARNING_SAMPLE.nearM of a junction, judged by an even sample of them, at least
 * 1 in 100: a supplier's file may cover far more than the city's junctions. O(junctions).
 */
export function nearShare(pings: Pick<Trips, "length" | "lat" | "lon">, junctions: readonly JunctionPoint[], index: JunctionIndex): number {
  const claims = claimNear(junctions, index);
  const step = Math.max(1, Math.floor(pings.length / LOOKS));
  let looks = 0;
  let near = 0;
  for (let i = 0; i < pings.length; i += step) {
    looks += 1;
    if (claims.find(pings.lat[i], pings.lon[i]) >= 0) near += 1;
  }
  return Math.max(0.01, near / Math.max(1, looks));
}

function claimNear(junctions: readonly JunctionPoint[], index: JunctionIndex): ClaimIndex {
  return index.claim({
    length: junctions.length,
    lat: Float64Array.from(junctions, (junction) => junction.lat),
    lon: Float64Array.from(junctions, (junction) => junction.lon),
    radiusM: new Float64Array(junctions.length).fill(LEARNING_SAMPLE.nearM),
    owner: Uint32Array.from(junctions, (_, i) => i),
  });
}
