import { eastM, northM, planeAt } from "@/core/geometry/plane";
import type { JunctionIndex } from "@/core/index/junction-index";
import { seededRandom } from "@/core/stats/random";
import type { JunctionPoint, PingColumns } from "@/core/types";

/** Pings near one junction as columns: where vehicles were, not which. */
export interface NearPings {
  length: number;
  eastM: Float32Array;
  northM: Float32Array;
  /** NaN where not given. */
  headingDeg: Float32Array;
  /** NaN where not given. */
  speedMs: Float32Array;
}

export interface NearSampler {
  add(pings: PingColumns): void;
  /** By index of the junction. */
  finish(): NearPings[];
}

export interface NearSampleOptions {
  radiusM: number;
  /** Pings kept for each junction. */
  most: number;
  seed: number;
}

export const NEAR_SAMPLE: Readonly<NearSampleOptions> = Object.freeze({ radiusM: 180, most: 1500, seed: 20_260_301 });

/**
 * Keeps an even sample of the pings within a radius of each junction, however many go by
 * (reservoir sampling, algorithm R: Vitter, ACM Transactions on Mathematical Software 11, 1985). O(pings).
 */
export function createNearSampler(junctions: readonly JunctionPoint[], index: JunctionIndex, options: Partial<NearSampleOptions> = {}): NearSampler {
  const { radiusM, most, seed } = { ...NEAR_SAMPLE, ...options };
  const planes = junctions.map((junction) => planeAt(junction.lat, junction.lon));
  const length = junctions.length;
  const claims = index.claim({
    length,
    lat: Float64Array.from(junctions, (junction) => junction.lat),
    lon: Float64Array.from(junctions, (junction) => junction.lon),
    radiusM: new Float64Array(length).fill(radiusM),
    owner: Uint32Array.from(junctions, (_, i) => i),
  });
  const kept = junctions.map(() => emptyNear(most));
  const seen = new Uint32Array(length);
  const random = seededRandom(seed);

  function place(j: number): number {
    seen[j] += 1;
    if (kept[j].length < most) return kept[j].length++;
    const at = Math.floor(random() * seen[j]);
    return at < most ? at : -1;
  }

  return {
    add(pings) {
      for (let i = 0; i < pings.length; i++) {
        const slot = claims.find(pings.lat[i], pings.lon[i]);
        if (slot < 0) continue;
        for (let k = claims.offsets[slot]; k < claims.offsets[slot + 1]; k++) {
          const j = claims.owners[k];
          const x = eastM(planes[j], pings.lon[i]);
          const y = northM(planes[j], pings.lat[i]);
          if (x * x + y * y > radiusM * radiusM) continue;
          const at = place(j);
          if (at < 0) continue;
          kept[j].eastM[at] = x;
          kept[j].northM[at] = y;
          kept[j].headingDeg[at] = pings.headingDeg[i];
          kept[j].speedMs[at] = pings.speedMs[i];
        }
      }
    },
    finish: () => kept,
  };
}

function emptyNear(most: number): NearPings {
  return {
    length: 0,
    eastM: new Float32Array(most),
    northM: new Float32Array(most),
    headingDeg: new Float32Array(most),
    speedMs: new Float32Array(most),
  };
}

const VERSION = 1;
const HEADER_BYTES = 4;
const BYTES_PER_PING = 6;
const NONE = 255;
const SPEED_STEP_MS = 0.25;

/** Six bytes a ping: position to 0.1 m within 3,276 m, heading to 1.4 degrees, speed to 0.25 m/s up to 63 m/s. O(pings). */
export function encodeNearPings(near: NearPings): Uint8Array<ArrayBuffer> {
  const bytes = new Uint8Array(HEADER_BYTES + near.length * BYTES_PER_PING);
  const view = new DataView(bytes.buffer);
  view.setUint8(0, VERSION);
  for (let i = 0; i < near.length; i++) {
    const at = HEADER_BYTES + i * BYTES_PER_PING;
    view.setInt16(at, Math.round(near.eastM[i] * 10), true);
    view.setInt16(at + 2, Math.round(near.northM[i] * 10), true);
    const heading = near.headingDeg[i];
    view.setUint8(at + 4, Number.isNaN(heading) ? NONE : Math.round((((heading % 360) + 360) % 360) * (NONE / 360)) % NONE);
    const speed = near.speedMs[i];
    view.setUint8(at + 5, Number.isNaN(speed) ? NONE : Math.min(NONE - 1, Math.round(speed / SPEED_STEP_MS)));
  }
  return bytes;
}

/** Throws TypeError for foreign or cut bytes. O(pings). */
export function decodeNearPings(bytes: Uint8Array): NearPings {
  const pings = (bytes.length - HEADER_BYTES) / BYTES_PER_PING;
  if (bytes[0] !== VERSION || !Number.isInteger(pings) || pings < 0) throw new TypeError("Not a sample of pings.");
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const near = emptyNear(pings);
  near.length = pings;
  for (let i = 0; i < pings; i++) {
    const at = HEADER_BYTES + i * BYTES_PER_PING;
    near.eastM[i] = view.getInt16(at, true) / 10;
    near.northM[i] = view.getInt16(at + 2, true) / 10;
    near.headingDeg[i] = bytes[at + 4] === NONE ? NaN : (bytes[at + 4] * 360) / NONE;
    near.speedMs[i] = bytes[at + 5] === NONE ? NaN : bytes[at + 5] * SPEED_STEP_MS;
  }
  return near;
}
