import type { Traversals } from "@/core/types";

/** One traversal on its way into the columns. */
export interface TraversalRow {
  movement: number;
  vehicle: number;
  enterMs: number;
  stopLineMs: number;
  exitMs: number;
  stops: number;
  stoppedS: number;
  farthestStopM: number;
  flags: number;
}

export interface TraversalBuilder {
  /** Adds a traversal; its track is `points` pairs of ms and s. */
  add(row: TraversalRow, trackMs: Float64Array, trackS: Float64Array, points: number): void;
  finish(): Traversals;
}

/** Grows columns by doubling; `finish` returns arrays of the exact length. */
export function createTraversalBuilder(): TraversalBuilder {
  let t = emptyTraversals(1024, 16384);
  let length = 0;
  let points = 0;
  return {
    add(row, trackMs, trackS, count) {
      if (length === t.movement.length || points + count > t.trackT.length) {
        t = resized(t, length, Math.max(1024, length * 2), points, Math.max(16384, (points + count) * 2));
      }
      t.movement[length] = row.movement;
      t.vehicle[length] = row.vehicle;
      t.enterMs[length] = row.enterMs;
      t.stopLineMs[length] = row.stopLineMs;
      t.exitMs[length] = row.exitMs;
      t.delayS[length] = NaN;
      t.stops[length] = Math.min(255, row.stops);
      t.stoppedS[length] = row.stoppedS;
      t.farthestStopM[length] = row.farthestStopM;
      t.flags[length] = row.flags;
      for (let n = 0; n < count; n++) {
        t.trackT[points + n] = (trackMs[n] - row.enterMs) / 1000;
        t.trackS[points + n] = trackS[n];
      }
      points += count;
      length += 1;
      t.trackOffset[length] = points;
    },
    finish() {
      const out = resized(t, length, length, points, points);
      out.length = length;
      return out;
    },
  };
}

function emptyTraversals(size: number, points: number): Traversals {
  return {
    length: 0,
    movement: new Uint32Array(size),
    vehicle: new Uint32Array(size),
    enterMs: new Float64Array(size),
    stopLineMs: new Float64Array(size),
    exitMs: new Float64Array(size),
    delayS: new Float32Array(size),
    stops: new Uint8Array(size),
    stoppedS: new Float32Array(size),
    farthestStopM: new Float32Array(size),
    flags: new Uint8Array(size),
    trackOffset: new Uint32Array(size + 1),
    trackT: new Float32Array(points),
    trackS: new Float32Array(points),
  };
}

function resized(from: Traversals, length: number, size: number, points: number, pointSize: number): Traversals {
  const to = emptyTraversals(size, pointSize);
  to.movement.set(from.movement.subarray(0, length));
  to.vehicle.set(from.vehicle.subarray(0, length));
  to.enterMs.set(from.enterMs.subarray(0, length));
  to.stopLineMs.set(from.stopLineMs.subarray(0, length));
  to.exitMs.set(from.exitMs.subarray(0, length));
  to.delayS.set(from.delayS.subarray(0, length));
  to.stops.set(from.stops.subarray(0, length));
  to.stoppedS.set(from.stoppedS.subarray(0, length));
  to.farthestStopM.set(from.farthestStopM.subarray(0, length));
  to.flags.set(from.flags.subarray(0, length));
  to.trackOffset.set(from.trackOffset.subarray(0, length + 1));
  to.trackT.set(from.trackT.subarray(0, points));
  to.trackS.set(from.trackS.subarray(0, points));
  return to;
}
