import type { Strip, StripSpec } from "./strip";

/**
 * Kernel of the adaptive smoothing method (Treiber and Helbing 2002; Treiber, Kesting and Wilson 2011).
 * Any consistent units; speeds of waves are positive here.
 */
export interface SmoothingKernel {
  /** Length scale along the leg. */
  sigmaM: number;
  /** Time scale. */
  tauS: number;
  /** Speed at which free traffic carries disturbances towards the stop line. */
  freeMs: number;
  /** Speed at which queued traffic carries them back. */
  waveMs: number;
  /** Speed at which the two views weigh the same, and the width of the change-over. */
  thresholdMs: number;
  widthMs: number;
}

/** Beyond this many scales a weight is below 5 % and the neighbour is left out. */
const REACH = 3;

/** Scales that follow the cells, so that a fine strip stays readable and a coarse one stays as it is. */
export function kernelOf(spec: StripSpec, freeMs: number, waveMs: number): SmoothingKernel {
  return {
    sigmaM: Math.max(15, spec.cellM / 2),
    tauS: Math.max(4, spec.cellS / 2),
    freeMs,
    waveMs,
    thresholdMs: 0.45 * freeMs,
    widthMs: 0.2 * freeMs,
  };
}

/** Totals seen at one place and moment. */
export interface Sample {
  tS: number;
  sM: number;
  distanceM: number;
  timeS: number;
}

/**
 * Smoothed speed at one place and moment from totals nearby, V = Σφd / Σφt in the free and in the queued
 * direction, mixed by their smaller value; NaN without samples. With t = 1 and d = v it is the published
 * method on point speeds. O(samples).
 */
export function smoothedSpeedAt(samples: readonly Sample[], tS: number, sM: number, kernel: SmoothingKernel): number {
  const along = (slowness: number) => {
    let distance = 0;
    let time = 0;
    for (const sample of samples) {
      const weight = weightOf(sample.tS - tS, sample.sM - sM, slowness, kernel);
      distance += weight * sample.distanceM;
      time += weight * sample.timeS;
    }
    return distance / time;
  };
  return mixSpeeds(along(1 / kernel.freeMs), along(-1 / kernel.waveMs), kernel);
}

/** Share of the queued view, from 0 in free traffic to 1 in a queue. */
export function queuedShare(freeViewMs: number, queuedViewMs: number, kernel: SmoothingKernel): number {
  return 0.5 * (1 + Math.tanh((kernel.thresholdMs - Math.min(freeViewMs, queuedViewMs)) / kernel.widthMs));
}

/**
 * Smoothed speed of each cell in m/s, row-major. Nothing is carried across the stop line, and a cell
 * without a trajectory in itself or in one of its eight neighbours stays NaN. O(cells × kernel).
 */
export function smoothSpeeds(strip: Strip, kernel: SmoothingKernel): Float32Array {
  const { columns, rows, bottomM, cellM } = strip.spec;
  const freeView = offsetsOf(strip.spec, 1 / kernel.freeMs, kernel);
  const queuedView = offsetsOf(strip.spec, -1 / kernel.waveMs, kernel);
  const out = new Float32Array(strip.timeS.length).fill(NaN);
  for (let row = 0; row < rows; row++) {
    const side = sideOf(bottomM, cellM, rows, row);
    for (let column = 0; column < columns; column++) {
      if (!isNear(strip, side, row, column)) continue;
      const free = viewOf(strip, freeView, side, row, column);
      const queued = viewOf(strip, queuedView, side, row, column);
      out[row * columns + column] = mixSpeeds(free, queued, kernel);
    }
  }
  return out;
}

/** Rows on the same side of the stop line as a row: from `low` up to, not including, `high`. */
interface Side {
  low: number;
  high: number;
}

interface Offsets {
  row: Int16Array;
  column: Int32Array;
  weight: Float64Array;
}

function weightOf(dtS: number, dsM: number, slowness: number, kernel: SmoothingKernel): number {
  return Math.exp(-Math.abs(dsM) / kernel.sigmaM - Math.abs(dtS + dsM * slowness) / kernel.tauS);
}

function mixSpeeds(free: number, queued: number, kernel: SmoothingKernel): number {
  const share = queuedShare(free, queued, kernel);
  return share * queued + (1 - share) * free;
}

function offsetsOf(spec: StripSpec, slowness: number, kernel: SmoothingKernel): Offsets {
  const found: [number, number, number][] = [];
  const rowReach = Math.floor((REACH * kernel.sigmaM) / spec.cellM);
  for (let row = -rowReach; row <= rowReach; row++) {
    const dsM = row * spec.cellM;
    const leanS = dsM / spec.waveMs;
    const middle = -(leanS + dsM * slowness) / spec.cellS;
    const columnReach = (REACH * kernel.tauS) / spec.cellS;
    for (let column = Math.ceil(middle - columnReach); column <= middle + columnReach; column++) {
      found.push([row, column, weightOf(column * spec.cellS + leanS, dsM, slowness, kernel)]);
    }
  }
  return {
    row: Int16Array.from(found, (f) => f[0]),
    column: Int32Array.from(found, (f) => f[1]),
    weight: Float64Array.from(found, (f) => f[2]),
  };
}

function viewOf(strip: Strip, offsets: Offsets, side: Side, row: number, column: number): number {
  const { columns } = strip.spec;
  let distance = 0;
  let time = 0;
  for (let k = 0; k < offsets.weight.length; k++) {
    const r = row + offsets.row[k];
    const c = column + offsets.column[k];
    if (r < side.low || r >= side.high || c < 0 || c >= columns) continue;
    const cell = r * columns + c;
    distance += offsets.weight[k] * strip.distanceM[cell];
    time += offsets.weight[k] * strip.timeS[cell];
  }
  return distance / time;
}

function sideOf(bottomM: number, cellM: number, rows: number, row: number): Side {
  const firstUpstream = Math.min(rows, Math.max(0, Math.round(-bottomM / cellM)));
  return row >= firstUpstream ? { low: firstUpstream, high: rows } : { low: 0, high: firstUpstream };
}

function isNear(strip: Strip, side: Side, row: number, column: number): boolean {
  const { columns } = strip.spec;
  for (let r = Math.max(side.low, row - 1); r <= Math.min(side.high - 1, row + 1); r++) {
    for (let c = Math.max(0, column - 1); c <= Math.min(columns - 1, column + 1); c++) {
      if (strip.timeS[r * columns + c] > 0) return true;
    }
  }
  return false;
}
