import { createWriteStream } from "node:fs";
import { writeFile } from "node:fs/promises";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { normalRandom, seededRandom, type Random } from "@/core/stats/random";

const COLUMNS = 25;
const ROWS = 20;
const SPACING_M = 400;
const BOX_M = 16;
const LANE_M = 3;
const EDGE_M = 250;
const CRUISE_MS = 12;
const NOISE_M = 4;
const TICK_S = 5;
const CYCLE_S = 90;
const GREEN_S = 40;
/** Metres of queue that one seen vehicle stands for, where one in five is seen. */
const QUEUE_STEP_M = 35;
const AT_ONCE = 2000;
const ORIGIN = { lat: 45.6, lon: -38.3 };
/** Metres for a degree at 45.6 N. */
const PER_LAT = 111_143.5;
const PER_LON = 78_010.7;
/** East and north steps of the four headings 0, 90, 180 and 270 degrees. */
const EAST = [0, 1, 0, -1];
const NORTH = [1, 0, -1, 0];

interface Vehicle {
  name: string;
  /** Junction ahead. */
  column: number;
  row: number;
  /** Index of the four headings. */
  heading: number;
  /** To the junction ahead; negative past the last one. */
  toGoM: number;
  speedMs: number;
  isLeaving: boolean;
}

/** The junctions of the lattice, 500 of them, as the file that a city loads first. */
export async function writeJunctions(path: string): Promise<void> {
  const lines = ["junction_id,name,lat,lon"];
  for (let row = 0; row < ROWS; row++) {
    for (let column = 0; column < COLUMNS; column++) {
      lines.push(`J${row}-${column},Street ${row} / Lane ${column},${latOf(row * SPACING_M)},${lonOf(column * SPACING_M)}`);
    }
  }
  await writeFile(path, `${lines.join("\n")}\n`);
}

/**
 * Trips along the straight streets of the lattice, in order of time, one position every 5 s: vehicles drive, wait at
 * fixed-time signals behind each other, go straight on or turn, and leave at an edge. No measure of truth: only bulk
 * that looks like traffic. The same seed gives the same bytes.
 */
export async function writePings(path: string, rows: number, seed: number, startMs: number): Promise<void> {
  await pipeline(Readable.from(pingChunks(rows, seed, startMs), { objectMode: true, highWaterMark: 2 }), createWriteStream(path));
}

/** The file's text, a stretch of 5 s at a time. */
export function* pingChunks(rows: number, seed: number, startMs: number): Generator<string> {
  const random = seededRandom(seed);
  const noise = normalRandom(random);
  let made = 0;
  const next = () => newVehicle(`s${seed}v${made++}`, random);
  const vehicles = Array.from({ length: AT_ONCE }, next);
  const queues = new Float64Array(COLUMNS * ROWS * 4);
  yield "vehicle_id,timestamp,lat,lon,speed_kmh,heading\n";
  let left = rows;
  for (let tS = 0; left > 0; tS += TICK_S) {
    const lines: string[] = [];
    const clearing = clearedSince(tS);
    for (let j = 0; j < queues.length; j++) if (clearing(j)) queues[j] = 0;
    for (let v = 0; v < vehicles.length && left > 0; v++) {
      const vehicle = vehicles[v];
      drive(vehicle, tS, queues, random);
      if (vehicle.isLeaving && vehicle.toGoM < -EDGE_M) vehicles[v] = next();
      lines.push(lineOf(vehicles[v], startMs + tS * 1000, noise));
      left -= 1;
    }
    yield lines.join("");
  }
}

function newVehicle(name: string, random: Random): Vehicle {
  const heading = Math.floor(random() * 4);
  // In at the edge that the heading points away from, or somewhere in the middle.
  const isFromEdge = random() < 0.5;
  const column = isFromEdge && heading === 1 ? 0 : isFromEdge && heading === 3 ? COLUMNS - 1 : Math.floor(random() * COLUMNS);
  const row = isFromEdge && heading === 0 ? 0 : isFromEdge && heading === 2 ? ROWS - 1 : Math.floor(random() * ROWS);
  return { name, column, row, heading, toGoM: SPACING_M * (0.4 + 0.5 * random()), speedMs: CRUISE_MS, isLeaving: false };
}

const junctionOf = (vehicle: Vehicle) => vehicle.row * COLUMNS + vehicle.column;
const phaseOf = (junction: number, tS: number) => (tS + junction * 37) % CYCLE_S;

function isGreen(junction: number, heading: number, tS: number): boolean {
  const phase = phaseOf(junction, tS);
  return heading % 2 === 0 ? phase < GREEN_S : phase >= CYCLE_S / 2 && phase < CYCLE_S / 2 + GREEN_S;
}

/** Queues of an approach are gone once it has had 20 s of green. */
function clearedSince(tS: number): (approach: number) => boolean {
  return (approach) => {
    const phase = phaseOf(approach >> 2, tS);
    const sinceS = approach % 2 === 0 ? phase : phase - CYCLE_S / 2;
    return sinceS >= 20 && sinceS < GREEN_S;
  };
}

function drive(vehicle: Vehicle, tS: number, queues: Float64Array, random: Random): void {
  const stepM = CRUISE_MS * TICK_S;
  const approach = junctionOf(vehicle) * 4 + vehicle.heading;
  const stopM = BOX_M + queues[approach];
  const mustWait = !vehicle.isLeaving && vehicle.toGoM >= BOX_M && vehicle.toGoM - stepM < stopM && !isGreen(approach >> 2, vehicle.heading, tS);
  if (mustWait) {
    if (vehicle.speedMs > 0) {
      vehicle.toGoM = Math.min(vehicle.toGoM, stopM);
      queues[approach] = Math.min(SPACING_M * 0.6, queues[approach] + QUEUE_STEP_M);
    }
    vehicle.speedMs = 0;
    return;
  }
  // Half a step to get going again.
  vehicle.toGoM -= vehicle.speedMs === 0 ? stepM / 2 : stepM;
  vehicle.speedMs = CRUISE_MS;
  if (vehicle.toGoM < 0 && !vehicle.isLeaving) pass(vehicle, random);
}

function pass(vehicle: Vehicle, random: Random): void {
  const chance = random();
  const turn = chance < 0.15 ? 3 : chance < 0.3 ? 1 : 0;
  const heading = (vehicle.heading + turn) % 4;
  const column = vehicle.column + EAST[heading];
  const row = vehicle.row + NORTH[heading];
  vehicle.heading = heading;
  vehicle.isLeaving = column < 0 || column >= COLUMNS || row < 0 || row >= ROWS;
  if (vehicle.isLeaving) return;
  vehicle.column = column;
  vehicle.row = row;
  vehicle.toGoM += SPACING_M;
}

function lineOf(vehicle: Vehicle, tMs: number, noise: Random): string {
  const { heading, toGoM, speedMs } = vehicle;
  const east = vehicle.column * SPACING_M - EAST[heading] * toGoM + NORTH[heading] * LANE_M + noise() * NOISE_M;
  const north = vehicle.row * SPACING_M - NORTH[heading] * toGoM - EAST[heading] * LANE_M + noise() * NOISE_M;
  const speedKmh = speedMs === 0 ? 0 : (speedMs + noise() * 0.5) * 3.6;
  return `${vehicle.name},${tMs},${latOf(north)},${lonOf(east)},${speedKmh.toFixed(1)},${heading * 90}\n`;
}

const latOf = (northM: number) => (ORIGIN.lat + northM / PER_LAT).toFixed(7);
const lonOf = (eastM: number) => (ORIGIN.lon + eastM / PER_LON).toFixed(7);
