import { latAt, lonAt, planeAt } from "@/core/geometry/plane";
import type { JunctionPoint, PingColumns } from "@/core/types";

/**
 * Two crossings 420 m apart on an east-west street, made by hand: every vehicle's course is known. Vehicles keep 2 m to
 * the right of the middle, drive 12 m/s, and those of odd number stand at the stop line of the first crossing they meet.
 */
export interface TownOptions {
  vehicles: number;
  pingS: number;
  rotateDeg: number;
  isMirrored: boolean;
  startMs: number;
  waitS: number;
}

export const TOWN: TownOptions = {
  vehicles: 96, pingS: 5, rotateDeg: 0, isMirrored: false, startMs: Date.UTC(2026, 2, 3, 8), waitS: 40,
};

export const CRUISE_MS = 12;
/** Distance of the stop line from the crossing's middle, m. */
export const LINE_M = 14;
const BRAKE_MS2 = 2;
const LANE_M = 2;

/** Ways as corner points in the middle of the street, metres; the first crossing lies at 0, 0 and the second at 420, 0. */
const WAYS: [number, number][][] = [
  [[-380, 0], [800, 0]],
  [[800, 0], [-380, 0]],
  [[0, -400], [0, 400]],
  [[0, 400], [0, -400]],
  [[420, -400], [420, 400]],
  [[420, 400], [420, -400]],
  [[-380, 0], [0, 0], [0, 400]],
  [[0, -400], [0, 0], [420, 0], [420, -400]],
];

export function makeTown(options: Partial<TownOptions> = {}): { pings: PingColumns; junctions: JunctionPoint[] } {
  const chosen = { ...TOWN, ...options };
  const plane = planeAt(45.6, -38.3);
  const place = (x: number, y: number): [number, number] => {
    const a = (chosen.rotateDeg * Math.PI) / 180;
    const east = chosen.isMirrored ? -x : x;
    return [latAt(plane, y * Math.cos(a) - east * Math.sin(a)), lonAt(plane, east * Math.cos(a) + y * Math.sin(a))];
  };
  const rows: number[][] = [];
  for (let v = 0; v < chosen.vehicles; v++) {
    const way = WAYS[v % WAYS.length];
    const stand = Math.floor(v / WAYS.length) % 2 === 1 ? chosen.waitS : 0;
    const line = distanceToFirstCrossing(way) - LINE_M;
    const total = lengthOf(way);
    for (let t = (v * 1.7) % chosen.pingS; ; t += chosen.pingS) {
      const [s, speed] = courseAt(t, line, stand);
      if (s > total) break;
      const [x, y, heading] = pointOn(way, s);
      const noise = wobble(v, t);
      const [lat, lon] = place(x + noise, y - noise / 2);
      const turned = chosen.isMirrored ? 360 - heading : heading;
      rows.push([v, chosen.startMs + (v * 20 + t) * 1000, lat, lon, speed, (turned + chosen.rotateDeg + 720) % 360]);
    }
  }
  const [latA, lonA] = place(0, 0);
  const [latB, lonB] = place(420, 0);
  return { pings: columnsOf(rows), junctions: [{ id: "A", lat: latA, lon: lonA }, { id: "B", lat: latB, lon: lonB }] };
}

export function columnsOf(rows: number[][]): PingColumns {
  return {
    length: rows.length,
    vehicle: Uint32Array.from(rows, (r) => r[0]),
    tMs: Float64Array.from(rows, (r) => r[1]),
    lat: Float64Array.from(rows, (r) => r[2]),
    lon: Float64Array.from(rows, (r) => r[3]),
    speedMs: Float32Array.from(rows, (r) => r[4]),
    headingDeg: Float32Array.from(rows, (r) => r[5]),
  };
}

export function rowsOf(pings: PingColumns): number[][] {
  return Array.from({ length: pings.length }, (_, i) => [
    pings.vehicle[i], pings.tMs[i], pings.lat[i], pings.lon[i], pings.speedMs[i], pings.headingDeg[i],
  ]);
}

/** Position noise within 1.5 m, the same for the same vehicle and time. */
function wobble(v: number, t: number): number {
  return 1.5 * Math.sin(v * 12.9898 + t * 78.233);
}

/** Distance and speed after t seconds: cruise, brake to a stand at the line, wait, speed up at the same rate. */
function courseAt(t: number, line: number, stand: number): [number, number] {
  if (stand === 0) return [CRUISE_MS * t, CRUISE_MS];
  const brakeS = CRUISE_MS / BRAKE_MS2;
  const brakeM = (CRUISE_MS * brakeS) / 2;
  const t1 = (line - brakeM) / CRUISE_MS;
  if (t < t1) return [CRUISE_MS * t, CRUISE_MS];
  if (t < t1 + brakeS) return [line - (BRAKE_MS2 * (t1 + brakeS - t) ** 2) / 2, BRAKE_MS2 * (t1 + brakeS - t)];
  const go = t - t1 - brakeS - stand;
  if (go < 0) return [line, 0];
  if (go < brakeS) return [line + (BRAKE_MS2 * go * go) / 2, BRAKE_MS2 * go];
  return [line + brakeM + CRUISE_MS * (go - brakeS), CRUISE_MS];
}

/** Delay of a vehicle that stands: the wait and half the braking and speeding-up times. */
export const delayOfStand = (waitS: number): number => waitS + CRUISE_MS / BRAKE_MS2;

function distanceToFirstCrossing(way: [number, number][]): number {
  const [x, y] = way[0];
  return Math.min(Math.hypot(x, y), Math.hypot(x - 420, y));
}

function lengthOf(way: [number, number][]): number {
  let total = 0;
  for (let i = 1; i < way.length; i++) total += Math.hypot(way[i][0] - way[i - 1][0], way[i][1] - way[i - 1][1]);
  return total;
}

function pointOn(way: [number, number][], s: number): [number, number, number] {
  let rest = s;
  for (let i = 1; ; i++) {
    const dx = way[i][0] - way[i - 1][0];
    const dy = way[i][1] - way[i - 1][1];
    const length = Math.hypot(dx, dy);
    if (rest <= length || i === way.length - 1) {
      const [ux, uy] = [dx / length, dy / length];
      const heading = ((Math.atan2(ux, uy) * 180) / Math.PI + 360) % 360;
      return [way[i - 1][0] + rest * ux + LANE_M * uy, way[i - 1][1] + rest * uy - LANE_M * ux, heading];
    }
    rest -= length;
  }
}
