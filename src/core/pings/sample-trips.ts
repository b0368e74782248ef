import { tripColumns, type Trips } from "@/core/pings/trips";

/**
 * A stratified sample of whole trips with about `most` pings (Cochran, Sampling Techniques, 1977): one of each stretch of
 * the list, whichever its hash says. Since trips stand in the order of their beginnings, it covers all hours alike and
 * does not depend on the order of the rows. All of them where they are no more. Facts that were taken from all trips stay.
 * O(pings kept + trips).
 */
export function sampleTrips(trips: Trips, most: number): Trips {
  if (trips.length <= most) return trips;
  const share = most / trips.length;
  const chosen: number[] = [];
  let length = 0;
  for (let stretch = 0; stretch < trips.count * share; stretch++) {
    const k = Math.floor((stretch + shareOf(stretch)) / share);
    if (k >= trips.count || k === chosen[chosen.length - 1]) continue;
    chosen.push(k);
    length += trips.tripOffset[k + 1] - trips.tripOffset[k];
  }
  const out: Trips = {
    ...trips,
    ...tripColumns(length),
    count: chosen.length,
    tripOffset: new Uint32Array(chosen.length + 1),
    tripVehicle: Uint32Array.from(chosen, (k) => trips.tripVehicle[k]),
    tripIntervalS: Float32Array.from(chosen, (k) => trips.tripIntervalS[k]),
    tripHasSpeed: Uint8Array.from(chosen, (k) => trips.tripHasSpeed[k]),
  };
  let at = 0;
  chosen.forEach((k, n) => {
    const [from, to] = [trips.tripOffset[k], trips.tripOffset[k + 1]];
    for (const column of ["tMs", "lat", "lon", "speedMs", "headingDeg"] as const) out[column].set(trips[column].subarray(from, to), at);
    at += to - from;
    out.tripOffset[n + 1] = at;
  });
  return out;
}

/** A number in [0, 1) that follows no pattern of the stretches (finaliser of MurmurHash3, Appleby, public domain). */
function shareOf(stretch: number): number {
  let h = stretch + 0x9e3779b9;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return ((h ^ (h >>> 16)) >>> 0) / 2 ** 32;
}
