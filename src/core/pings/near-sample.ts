import { eastM, northM, planeAt } from "@/core/geometry/plane";
import type { JunctionIndex } from "@/core/index/junction-index";
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

/** Near pings with what decides which of them are kept, the smallest first. */
export interface NearSample extends NearPings {
  /** In [0, 1), drawn from the ping itself. */
  priority: Float64Array;
}

export interface NearSampler {
  /** Looks at the pings of vehicles with smaller numbers than `vehicles`. */
  add(pings: PingColumns, vehicles?: number): void;
  /** By index of the junction, in no order; the sampler begins afresh. */
  finish(): NearSample[];
}

export interface NearSampleOptions {
  radiusM: number;
  /** Pings kept for each junction. */
  most: number;
}

export const NEAR_SAMPLE = Object.freeze({ radiusM: 180, most: 1500 });

/**
 * Keeps an even sample of the pings within a radius of each junction, however many go by: those whose hash is smallest
 * (bottom-k sampling: Cohen and Kaplan, Summarizing Data using Bottom-k Sketches, PODC 2007). What is kept depends
 * neither on the order of the pings nor on how they were dealt out to several samplers. O(pings).
 */
export function createNearSampler(junctions: readonly JunctionPoint[], index: JunctionIndex, options: Partial<NearSampleOptions> = {}): NearSampler {
  const { radiusM, most } = { ...NEAR_SAMPLE, ...options };
  const planes = junctions.map((junction) => planeAt(junction.lat, junction.lon));
  const length = junctions.length;
  const claims = index.claim({
    length,
    lat: Float64Array.from(junctions, (junction) => junction.lat),
    lon: Float64Array.from(junctions, (junction) => junction.lon),
    radiusM: new Float64Array(length).fill(radiusM),
    owner: Uint32Array.from(junctions, (_, i) => i),
  });
  const draw = createDraw();
  let kept = junctions.map(() => emptySample(FIRST_ROOM));
  const limit = new Float64Array(length).fill(1);

  function keep(j: number, priority: number, pings: PingColumns, i: number): void {
    const x = eastM(planes[j], pings.lon[i]);
    const y = northM(planes[j], pings.lat[i]);
    if (x * x + y * y > radiusM * radiusM) return;
    const sample = kept[j];
    if (sample.length === 2 * most) limit[j] = thin(sample, most);
    if (priority >= limit[j]) return;
    if (sample.length === sample.priority.length) grow(sample, Math.min(2 * most, sample.length * 2));
    const at = sample.length++;
    sample.eastM[at] = x;
    sample.northM[at] = y;
    sample.headingDeg[at] = pings.headingDeg[i];
    sample.speedMs[at] = pings.speedMs[i];
    sample.priority[at] = priority;
  }

  return {
    add(pings, vehicles = Infinity) {
      for (let i = 0; i < pings.length; i++) {
        if (pings.vehicle[i] >= vehicles) continue;
        const slot = claims.find(pings.lat[i], pings.lon[i]);
        if (slot < 0) continue;
        // Of most pings a first look says that they are not among the smallest.
        const first = draw.first(pings, i);
        for (let k = claims.offsets[slot]; k < claims.offsets[slot + 1]; k++) {
          const j = claims.owners[k];
          if (first < limit[j]) keep(j, draw.whole(first, pings, i), pings, i);
        }
      }
    },
    finish() {
      const samples = kept.map(trimmed);
      kept = junctions.map(() => emptySample(FIRST_ROOM));
      limit.fill(1);
      return samples;
    },
  };
}

const FIRST_ROOM = 16;

/** The sample of one junction from those of several samplers, in order of priority. O(pings × log). */
export function joinNearSamples(parts: readonly NearSample[], most: number = NEAR_SAMPLE.most): NearSample {
  const sorted = new Float64Array(parts.reduce((sum, part) => sum + part.length, 0));
  let length = 0;
  for (const part of parts) {
    sorted.set(part.priority.subarray(0, part.length), length);
    length += part.length;
  }
  sorted.sort();
  const out = emptySample(Math.min(most, length));
  out.length = out.priority.length;
  const isTaken = new Uint8Array(out.length);
  for (const part of parts) {
    for (let i = 0; i < part.length; i++) {
      // A number sort and a search take less than a sort by a function.
      let place = placeIn(sorted, part.priority[i]);
      while (isTaken[place] === 1) place += 1;
      if (place >= out.length) continue;
      isTaken[place] = 1;
      for (const name of SAMPLE_COLUMNS) out[name][place] = part[name][i];
    }
  }
  return out;
}

/** Index of the first entry that is not smaller. */
function placeIn(sorted: Float64Array, value: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

function trimmed(sample: NearSample): NearSample {
  const { length } = sample;
  return {
    length,
    eastM: sample.eastM.slice(0, length),
    northM: sample.northM.slice(0, length),
    headingDeg: sample.headingDeg.slice(0, length),
    speedMs: sample.speedMs.slice(0, length),
    priority: sample.priority.slice(0, length),
  };
}

/** Keeps the `most` pings of least priority, in the order in which they are; answers with the first priority that is too large. */
function thin(sample: NearSample, most: number): number {
  const limit = sample.priority.slice(0, sample.length).sort()[most];
  let to = 0;
  for (let i = 0; i < sample.length; i++) {
    if (sample.priority[i] >= limit) continue;
    for (const name of SAMPLE_COLUMNS) sample[name][to] = sample[name][i];
    to += 1;
  }
  sample.length = to;
  return limit;
}

function grow(sample: NearSample, room: number): void {
  const larger = emptySample(room);
  for (const name of SAMPLE_COLUMNS) {
    larger[name].set(sample[name]);
    Object.assign(sample, { [name]: larger[name] });
  }
}

const SAMPLE_COLUMNS = ["eastM", "northM", "headingDeg", "speedMs", "priority"] as const;

/**
 * A number in [0, 1) from a ping's time, place and speed: multiply and rotate over their bits (as MurmurHash3, Appleby,
 * public domain). `first` is its upper 32 bits, `whole` adds 21 more to it.
 */
function createDraw() {
  const values = new Float64Array(4);
  const words = new Uint32Array(values.buffer);
  const mixed = (seed: number): number => {
    let h = seed;
    for (let w = 0; w < 8; w++) {
      const k = Math.imul(words[w], 0xcc9e2d51);
      h ^= Math.imul((k << 15) | (k >>> 17), 0x1b873593);
      h = (Math.imul((h << 13) | (h >>> 19), 5) + 0xe6546b64) | 0;
    }
    h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
    h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
    return (h ^ (h >>> 16)) >>> 0;
  };
  const take = (pings: PingColumns, i: number): void => {
    values[0] = pings.tMs[i];
    values[1] = pings.lat[i];
    values[2] = pings.lon[i];
    values[3] = pings.speedMs[i];
  };
  return {
    first(pings: PingColumns, i: number): number {
      take(pings, i);
      return mixed(1) / 2 ** 32;
    },
    whole(first: number, pings: PingColumns, i: number): number {
      take(pings, i);
      return first + (mixed(2) >>> 11) / 2 ** 53;
    },
  };
}

function emptySample(rows: number): NearSample {
  return { ...emptyNear(rows), priority: new Float64Array(rows) };
}

function emptyNear(rows: number): NearPings {
  return {
    length: 0,
    eastM: new Float32Array(rows),
    northM: new Float32Array(rows),
    headingDeg: new Float32Array(rows),
    speedMs: new Float32Array(rows),
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
