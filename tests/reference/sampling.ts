import { bearingDeg, latFromY, lonFromX } from "./plane";
import type { Plane } from "./plane";
import { createRandom, hashUnit } from "./random";
import type { Random } from "./random";

/** A vehicle's true course without noise: one position a second from `startS` on. */
export interface SampledCourse {
  id: string;
  startS: number;
  /** Metres in the scenario's plane. */
  x: Float64Array;
  y: Float64Array;
}

export interface NoiseOptions {
  /** Standard deviation of the position error in each axis, metres, and how long it lasts, seconds. */
  positionSigmaM: number;
  correlationS: number;
  speedSigmaMs: number;
  /** Heading error at walking pace and the part that never goes away, degrees. */
  headingSlowDeg: number;
  headingFloorDeg: number;
  /** Standard deviation of the clock error of each ping, milliseconds. */
  jitterMs: number;
  withSpeed: boolean;
  withHeading: boolean;
}

export const OPEN_SKY: NoiseOptions = {
  positionSigmaM: 4,
  correlationS: 20,
  speedSigmaMs: 0.4,
  headingSlowDeg: 12,
  headingFloorDeg: 2.5,
  jitterMs: 0,
  withSpeed: true,
  withHeading: true,
};

export const STREET_CANYON: NoiseOptions = { ...OPEN_SKY, positionSigmaM: 8, speedSigmaMs: 0.8, headingFloorDeg: 5, jitterMs: 150 };

export interface Ping {
  vehicleId: string;
  tMs: number;
  lat: number;
  lon: number;
  speedKmh: number | null;
  headingDeg: number | null;
}

/** Samplings nest: whoever is in the 5 % is in the 20 %. */
export function isSampled(scenarioId: string, vehicleId: string, share: number): boolean {
  return hashUnit(`${scenarioId}:${vehicleId}`) < share;
}

/** Below this speed a receiver's heading is noise. */
const STANDING_MS = 0.7;

/** Pings of one vehicle every `intervalS`, from a phase of its own, with position noise that is an AR(1) process in time. */
export function samplePings(
  course: SampledCourse, scenarioId: string, intervalS: number, noise: NoiseOptions, startMs: number, plane: Plane,
): Ping[] {
  const random = createRandom(Math.floor(hashUnit(`${scenarioId}:${course.id}:${intervalS}:${course.startS}`) * 4294967296));
  const error = createError(noise, random);
  const pings: Ping[] = [];
  for (let at = random.next() * intervalS; at <= course.x.length - 1; at += intervalS) {
    const truth = stateAt(course, at);
    const off = error(intervalS);
    const speed = Math.max(0, truth.speedMs + noise.speedSigmaMs * random.normal() * (truth.speedMs < STANDING_MS ? 0.3 : 1));
    const turn = noise.headingFloorDeg + noise.headingSlowDeg / Math.max(truth.speedMs, 1);
    const heading = truth.speedMs < STANDING_MS ? random.next() * 360 : truth.headingDeg + turn * random.normal();
    pings.push({
      vehicleId: course.id,
      tMs: startMs + Math.round((course.startS + at) * 1000 + noise.jitterMs * random.normal()),
      lat: latFromY(plane, truth.y + off.y),
      lon: lonFromX(plane, truth.x + off.x),
      speedKmh: noise.withSpeed ? speed * 3.6 : null,
      headingDeg: noise.withHeading ? (heading + 720) % 360 : null,
    });
  }
  return pings;
}

function createError(noise: NoiseOptions, random: Random): (stepS: number) => { x: number; y: number } {
  let x = noise.positionSigmaM * random.normal();
  let y = noise.positionSigmaM * random.normal();
  return (stepS) => {
    const keep = Math.exp(-stepS / noise.correlationS);
    const fresh = noise.positionSigmaM * Math.sqrt(1 - keep * keep);
    x = keep * x + fresh * random.normal();
    y = keep * y + fresh * random.normal();
    return { x, y };
  };
}

/** Position at `at` seconds after the course's start; speed and heading from the seconds around it. */
function stateAt(course: SampledCourse, at: number) {
  const last = course.x.length - 1;
  const k = Math.min(Math.floor(at), Math.max(0, last - 1));
  const next = Math.min(k + 1, last);
  const part = at - k;
  const from = Math.max(0, Math.round(at) - 1);
  const to = Math.min(last, Math.round(at) + 1);
  let back = from;
  while (back > 0 && Math.hypot(course.x[to] - course.x[back], course.y[to] - course.y[back]) < 1) back--;
  return {
    x: course.x[k] + part * (course.x[next] - course.x[k]),
    y: course.y[k] + part * (course.y[next] - course.y[k]),
    speedMs: to > from ? Math.hypot(course.x[to] - course.x[from], course.y[to] - course.y[from]) / (to - from) : 0,
    headingDeg: bearingDeg(course.x[to] - course.x[back], course.y[to] - course.y[back]),
  };
}

export const PING_HEADER = "vehicle_id,timestamp,lat,lon,speed_kmh,heading";

export function pingLine(ping: Ping): string {
  const speed = ping.speedKmh === null ? "" : ping.speedKmh.toFixed(1);
  const heading = ping.headingDeg === null ? "" : (Math.round(ping.headingDeg) % 360).toString();
  return `${ping.vehicleId},${ping.tMs},${ping.lat.toFixed(6)},${ping.lon.toFixed(6)},${speed},${heading}`;
}
