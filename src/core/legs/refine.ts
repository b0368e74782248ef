import { chordBearingDeg, lengthOf, pointAt, simplify } from "@/core/geometry/polyline";
import type { Offsets } from "@/core/legs/usage";

/** Stretch of a line over which sideways distances are averaged, m. */
export const OFFSET_BIN_M = 10;
const SPREAD_BINS = 1.2;
/** Weight of the present line, in pings. */
const LINE_N = 3;
const MOST_SHIFT_M = 8;
const SIMPLIFY_M = 0.6;
const RAD = Math.PI / 180;

/** Moves a line sideways to the middle of its matched pings, smoothed along it. Null where no ping says anything. */
export function refineLine(line: Float64Array, offsets: Offsets): Float64Array | null {
  const length = lengthOf(line);
  const total = offsets.count.reduce((sum, n) => sum + n, 0);
  if (total === 0 || length < 2 * OFFSET_BIN_M) return null;
  const points = Math.max(2, Math.round(length / OFFSET_BIN_M) + 1);
  const out = new Float64Array(points * 2);
  for (let p = 0; p < points; p++) {
    const at = (p / (points - 1)) * length;
    const shift = shiftAt(offsets, at / OFFSET_BIN_M - 0.5);
    const bearing = chordBearingDeg(line, Math.max(0, at - 5), Math.min(length, at + 5)) * RAD;
    const [x, y] = pointAt(line, at);
    out[2 * p] = x + shift * Math.cos(bearing);
    out[2 * p + 1] = y - shift * Math.sin(bearing);
  }
  return simplify(out, SIMPLIFY_M);
}

/** Mean offset around a place, in bins, drawn to zero where few pings lie. */
function shiftAt(offsets: Offsets, bin: number): number {
  let sum = 0;
  let weight = 0;
  for (let b = 0; b < offsets.count.length; b++) {
    if (offsets.count[b] === 0 || Math.abs(b - bin) > 4 * SPREAD_BINS) continue;
    const share = Math.exp(-0.5 * ((b - bin) / SPREAD_BINS) ** 2);
    sum += share * offsets.sum[b];
    weight += share * offsets.count[b];
  }
  return Math.max(-MOST_SHIFT_M, Math.min(MOST_SHIFT_M, sum / (weight + LINE_N)));
}
