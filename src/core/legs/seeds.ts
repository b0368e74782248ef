import { angleBetweenDeg } from "@/core/geometry/angles";
import { eastM, northM } from "@/core/geometry/plane";
import type { ClaimIndex } from "@/core/index/junction-index";
import type { Frame } from "@/core/legs/frame";
import { LEARNING } from "@/core/legs/learning";
import { collectPassages, type SeedSink } from "@/core/legs/passage-seeds";
import type { Trips } from "@/core/pings/trips";

/** A direction in which traffic reaches or leaves a junction. */
export interface Seed {
  junction: number;
  inbound: boolean;
  /** Direction of travel. */
  bearingDeg: number;
  /** Distinct trips within about 15 degrees. */
  support: number;
}

const BINS = 360;
const SECTORS = 36;
const RAD = Math.PI / 180;

/**
 * Groups the headings of moving pings around every junction on the circle, inbound and outbound apart, by a
 * kernel density with wrapped normal kernel (Fisher, Statistical Analysis of Circular Data, 1993), and takes its
 * peaks. `rings` is claimed by junctions with LEARNING.ringOuterM; `reach`, for sparse pings, with PASSAGES.reachM.
 * O(pings + junctions x 360 x kernel).
 */
export function findSeeds(trips: Trips, frame: Frame, rings: ClaimIndex, reach: ClaimIndex | null): Seed[] {
  const count = frame.junctions.length * 2;
  const weight = new Float32Array(count * BINS);
  const tripsIn = new Uint32Array(count * SECTORS);
  const lastTrip = new Int32Array(count * SECTORS).fill(-1);
  const sink: SeedSink = (junction, inbound, bearing, share, trip) => {
    const role = junction * 2 + (inbound ? 1 : 0);
    weight[role * BINS + (Math.floor(bearing) % BINS)] += share;
    const sector = role * SECTORS + (Math.floor(bearing / (360 / SECTORS)) % SECTORS);
    if (lastTrip[sector] !== trip) {
      lastTrip[sector] = trip;
      tripsIn[sector] += 1;
    }
  };
  collectHeadings(trips, frame, rings, sink);
  if (reach) collectPassages(trips, frame, reach, sink);
  const seeds: Seed[] = [];
  for (let role = 0; role < count; role++) {
    const sectors = tripsIn.subarray(role * SECTORS, (role + 1) * SECTORS);
    const total = sectors.reduce((sum, value) => sum + value, 0);
    for (const peak of findPeaks(weight.subarray(role * BINS, (role + 1) * BINS))) {
      const support = tripsNear(sectors, peak);
      if (support < Math.max(LEARNING.seedTrips, LEARNING.seedShare * total)) continue;
      seeds.push({ junction: role >> 1, inbound: (role & 1) === 1, bearingDeg: peak, support });
    }
  }
  return seeds;
}

/** Moving pings in the ring that point to or from the junction; those that would pass it far off count less. */
function collectHeadings(trips: Trips, frame: Frame, rings: ClaimIndex, sink: SeedSink): void {
  const cosLimit = Math.cos(LEARNING.headingToRayDeg * RAD);
  const outer = frame.nearestM.map((nearest) =>
    Math.min(LEARNING.ringOuterM, Math.max(LEARNING.ringLeastM, LEARNING.ringShare * nearest)),
  );
  for (let k = 0; k < trips.count; k++) {
    for (let i = trips.tripOffset[k]; i < trips.tripOffset[k + 1]; i++) {
      const heading = trips.headingDeg[i];
      if (!(trips.speedMs[i] >= LEARNING.movingMs && heading >= 0)) continue;
      const slot = rings.find(trips.lat[i], trips.lon[i]);
      if (slot < 0) continue;
      const hx = Math.sin(heading * RAD);
      const hy = Math.cos(heading * RAD);
      for (let n = rings.offsets[slot]; n < rings.offsets[slot + 1]; n++) {
        const junction = rings.owners[n];
        const x = eastM(frame.planes[junction], trips.lon[i]);
        const y = northM(frame.planes[junction], trips.lat[i]);
        const r = Math.hypot(x, y);
        if (r < LEARNING.ringInnerM || r > outer[junction]) continue;
        const outward = (x * hx + y * hy) / r;
        const pass = Math.abs(x * hy - y * hx);
        if (Math.abs(outward) < cosLimit || pass > LEARNING.passWithinM) continue;
        sink(junction, outward < 0, heading, Math.exp(-0.5 * (pass / LEARNING.passSpreadM) ** 2), k);
      }
    }
  }
}

/** Peaks of the smoothed density in bins of one degree, strongest first, at least LEARNING.apartDeg apart. */
export function findPeaks(histogram: Float32Array): number[] {
  const density = smoothCircle(histogram, LEARNING.kernelDeg);
  const highest = density.reduce((most, value) => Math.max(most, value), 0);
  const tops: number[] = [];
  for (let b = 0; b < BINS; b++) {
    const before = density[(b + BINS - 1) % BINS];
    const after = density[(b + 1) % BINS];
    if (density[b] > before && density[b] >= after && density[b] > LEARNING.seedShare * highest) tops.push(b);
  }
  tops.sort((a, b) => density[b] - density[a] || a - b);
  const peaks: number[] = [];
  for (const top of tops) {
    if (peaks.every((peak) => angleBetweenDeg(peak, top + 0.5) >= LEARNING.apartDeg)) peaks.push(top + 0.5);
  }
  return peaks;
}

function smoothCircle(histogram: Float32Array, sigmaDeg: number): Float64Array {
  const reach = Math.ceil(3.5 * sigmaDeg);
  const out = new Float64Array(BINS);
  for (let b = 0; b < BINS; b++) {
    if (histogram[b] === 0) continue;
    for (let d = -reach; d <= reach; d++) out[(b + d + BINS) % BINS] += histogram[b] * Math.exp(-0.5 * (d / sigmaDeg) ** 2);
  }
  return out;
}

/** Distinct trips in the sector of a bearing and its two neighbours, at most; trips may count in two sectors. */
function tripsNear(sectors: Uint32Array, bearing: number): number {
  const home = Math.floor(bearing / (360 / SECTORS));
  let sum = 0;
  for (let d = -1; d <= 1; d++) sum += sectors[(home + d + SECTORS) % SECTORS];
  return sum;
}
