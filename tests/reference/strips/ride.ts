import { addTracks } from "@/core/strips/add-tracks";
import { cellAt, createStrip, specOfWindow, speedsOf } from "@/core/strips/strip";
import type { StripSpec } from "@/core/strips/strip";

import type { CoreRun } from "../run-core";
import { crossingS, legTracks } from "./leg-tracks";

export interface CellShape {
  cellM: number;
  cellS: number;
  /** Infinity for rectangles. */
  waveMs: number;
}

const STEP_S = 0.25;
const FILL_S = 60;
const UNSEEN_MS = 12;
const QUARTER_S = 900;

/**
 * Error of mean travel times per leg and quarter, read by riding through the speeds of strips from 250 m (less on
 * shorter legs) to the stop line at the moments at which all vehicles really set out, as a share of the vehicles' own;
 * weighted by vehicles. Strips are made of the seen vehicles only. Cells that nobody was seen in take the nearest speed
 * of their row within a minute, else the free speed.
 */
export function rideError(run: CoreRun, isSeen: (vehicle: string) => boolean, shape: CellShape, seconds: number): number {
  let error = 0;
  let vehicles = 0;
  run.network.legs.forEach(({ lengthM }, leg) => {
    const topM = Math.min(lengthM, 250) - 10;
    const seen = legTracks(run, leg, isSeen);
    if (seen.tracks === 0) return;
    const strip = createStrip(specOfWindow({ fromS: 0, toS: seconds, bottomM: -20, topM: topM + 40 }, shape.cellS, shape.cellM, shape.waveMs));
    addTracks(strip, seen);
    const speeds = fillRows(speedsOf(strip), strip.spec);
    const all = legTracks(run, leg, () => true);
    const quarters = new Map<number, { own: number; read: number; n: number }>();
    for (let k = 0; k < all.tracks; k++) {
      const from = crossingS(all, k, topM);
      const to = crossingS(all, k, 0);
      if (!(from > 120 && to < seconds - 100)) continue;
      const quarter = Math.floor(from / QUARTER_S);
      const sums = quarters.get(quarter) ?? { own: 0, read: 0, n: 0 };
      sums.own += to - from;
      sums.read += rideS(speeds, strip.spec, from, topM, seconds);
      sums.n++;
      quarters.set(quarter, sums);
    }
    for (const { own, read, n } of quarters.values()) {
      error += (n * Math.abs(read - own)) / own;
      vehicles += n;
    }
  });
  return error / vehicles;
}

function rideS(speeds: Float32Array, spec: StripSpec, fromS: number, topM: number, endS: number): number {
  let t = fromS;
  let s = topM;
  while (s > 0 && t < endS) {
    const cell = cellAt(spec, t, s);
    s -= Math.max(0, cell < 0 ? UNSEEN_MS : speeds[cell]) * STEP_S;
    t += STEP_S;
  }
  return t - fromS;
}

function fillRows(speeds: Float32Array, { columns, rows, cellS }: StripSpec): Float32Array {
  const filled = Float32Array.from(speeds);
  const reach = Math.max(1, Math.floor(FILL_S / cellS));
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const cell = row * columns + column;
      if (Number.isNaN(speeds[cell])) filled[cell] = nearestSpeed(speeds, row * columns, column, columns, reach);
    }
  }
  return filled;
}

function nearestSpeed(speeds: Float32Array, rowStart: number, column: number, columns: number, reach: number): number {
  for (let step = 1; step <= reach; step++) {
    const sides = [column - step, column + step]
      .filter((c) => c >= 0 && c < columns)
      .map((c) => speeds[rowStart + c])
      .filter((v) => !Number.isNaN(v));
    if (sides.length > 0) return sides.reduce((sum, v) => sum + v, 0) / sides.length;
  }
  return UNSEEN_MS;
}
