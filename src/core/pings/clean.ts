import { planeAt } from "@/core/geometry/plane";
import { CLEANING } from "@/core/options";
import { groupByVehicle } from "@/core/pings/group-by-vehicle";
import { fillMotion } from "@/core/pings/motion";
import { tripColumns, type Trips } from "@/core/pings/trips";
import type { CleanReport, PingColumns } from "@/core/types";

/** Of a degree of longitude, at most: the largest radius of curvature of WGS 84, 6,399.6 km, times a degree. */
const MOST_METRES_PER_LON = 111_700;

export interface Cleaned {
  trips: Trips;
  report: Pick<CleanReport, "pings" | "duplicates" | "jumps" | "trips">;
}

/**
 * Stage 2: orders each vehicle's pings, drops second pings of one instant and impossible jumps
 * (faster than 60 m/s after allowing for position noise), and cuts trips at silences of more than 180 s.
 * The result does not depend on the order of the rows nor on the numbering of the vehicles. O(n log n) at worst.
 */
export function cleanPings(pings: PingColumns): Cleaned {
  const { vehicles, offsets, order } = groupByVehicle(pings);
  const kept = new Uint32Array(pings.length);
  const starts: number[] = [];
  let length = 0;
  let duplicates = 0;
  let jumps = 0;
  const walker = createWalker(pings);
  for (let v = 0; v < vehicles; v++) {
    const from = length;
    let tripStart = length;
    for (let k = offsets[v]; k < offsets[v + 1]; k++) {
      const i = order[k];
      if (length > from && pings.tMs[kept[length - 1]] === pings.tMs[i]) {
        duplicates += 1;
        continue;
      }
      const silence = length > tripStart && pings.tMs[i] - pings.tMs[kept[length - 1]] > CLEANING.maxGapS * 1000;
      if (silence || length === from) {
        tripStart = length;
        starts.push(length);
      } else if (walker.isJump(kept[length - 1], i)) {
        jumps += 1;
        const next = nextInstant(pings, order, k, offsets[v + 1]);
        const isOutlier = next < 0 || !walker.isJump(kept[length - 1], next) || walker.isJump(i, next);
        if (isOutlier) continue;
        if (length - tripStart === 1) length -= 1;
        else {
          tripStart = length;
          starts.push(length);
          jumps -= 1;
        }
      }
      kept[length++] = i;
    }
  }
  const trips = gather(pings, kept, length, starts);
  return { trips, report: { pings: pings.length, duplicates, jumps, trips: trips.count } };
}

function nextInstant(pings: PingColumns, order: Uint32Array, k: number, end: number): number {
  for (let n = k + 1; n < end; n++) if (pings.tMs[order[n]] !== pings.tMs[order[k]]) return order[n];
  return -1;
}

function createWalker(pings: PingColumns): { isJump(a: number, b: number): boolean } {
  const { tMs, lat, lon } = pings;
  const plane = pings.length > 0 ? planeAt(lat[0], lon[0]) : planeAt(0, 0);
  const cosHere = Math.cos((plane.lat0 * Math.PI) / 180);
  return {
    isJump(a, b) {
      const reach = (CLEANING.maxSpeedMs * (tMs[b] - tMs[a])) / 1000 + CLEANING.noiseM;
      const dy = (lat[b] - lat[a]) * plane.metresPerLat;
      let dLon = lon[b] - lon[a];
      if (dLon > 180) dLon -= 360;
      else if (dLon < -180) dLon += 360;
      // No degree of longitude is longer than one at the equator: nearly every step is plain without a cosine.
      const widest = dLon * MOST_METRES_PER_LON;
      if (widest * widest + dy * dy <= reach * reach) return false;
      // The scale east to west is set at the step's own latitude: files may span a country.
      const dx = (dLon * plane.metresPerLon * Math.cos((lat[a] * Math.PI) / 180)) / cosHere;
      return dx * dx + dy * dy > reach * reach;
    },
  };
}

/** Copies the kept pings trip by trip, the trips ordered by their first ping. */
function gather(pings: PingColumns, kept: Uint32Array, length: number, starts: number[]): Trips {
  const count = starts.length;
  const turn = Uint32Array.from({ length: count }, (_, k) => k);
  const first = (k: number): number => kept[starts[k]];
  turn.sort((a, b) => {
    const i = first(a);
    const j = first(b);
    return pings.tMs[i] - pings.tMs[j] || pings.lat[i] - pings.lat[j] || pings.lon[i] - pings.lon[j] || a - b;
  });
  const trips: Trips = {
    ...tripColumns(length),
    count,
    tripOffset: new Uint32Array(count + 1),
    tripVehicle: new Uint32Array(count),
    tripIntervalS: new Float32Array(count),
    tripHasSpeed: new Uint8Array(count),
    hasSpeed: false,
    hasHeading: false,
    medianIntervalS: NaN,
  };
  let at = 0;
  for (let k = 0; k < count; k++) {
    const trip = turn[k];
    const end = trip + 1 < count ? starts[trip + 1] : length;
    trips.tripVehicle[k] = pings.vehicle[kept[starts[trip]]];
    copyPings(pings, kept, starts[trip], end, trips, at);
    at += end - starts[trip];
    trips.tripOffset[k + 1] = at;
  }
  fillMotion(trips);
  return trips;
}

/** A column at a time: the reading jumps, and the jumps of one column wait for each other least. */
function copyPings(pings: PingColumns, kept: Uint32Array, from: number, to: number, trips: Trips, at: number): void {
  const { tMs, lat, lon, speedMs, headingDeg } = pings;
  const shift = at - from;
  for (let n = from; n < to; n++) trips.tMs[n + shift] = tMs[kept[n]];
  for (let n = from; n < to; n++) trips.lat[n + shift] = lat[kept[n]];
  for (let n = from; n < to; n++) trips.lon[n + shift] = lon[kept[n]];
  for (let n = from; n < to; n++) trips.speedMs[n + shift] = speedMs[kept[n]];
  for (let n = from; n < to; n++) trips.headingDeg[n + shift] = headingDeg[kept[n]];
}
