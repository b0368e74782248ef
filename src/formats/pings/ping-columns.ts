import type { PingColumns } from "@/core/types";

/** Columns with room for so many rows, none of them filled. */
export function emptyColumns(rows: number): PingColumns {
  return {
    length: 0,
    vehicle: new Uint32Array(rows),
    tMs: new Float64Array(rows),
    lat: new Float64Array(rows),
    lon: new Float64Array(rows),
    speedMs: new Float32Array(rows),
    headingDeg: new Float32Array(rows),
  };
}

/** `to` with a batch behind it: the same columns where they have room, else half as large again. */
export function appendColumns(to: PingColumns, batch: PingColumns): PingColumns {
  const needed = to.length + batch.length;
  let grown = to;
  if (needed > to.vehicle.length) {
    grown = emptyColumns(Math.max(needed, Math.ceil(to.vehicle.length * 1.5)));
    copyInto(grown, 0, to);
  }
  copyInto(grown, to.length, batch);
  grown.length = needed;
  return grown;
}

function copyInto(to: PingColumns, at: number, from: PingColumns): void {
  to.vehicle.set(from.vehicle.subarray(0, from.length), at);
  to.tMs.set(from.tMs.subarray(0, from.length), at);
  to.lat.set(from.lat.subarray(0, from.length), at);
  to.lon.set(from.lon.subarray(0, from.length), at);
  to.speedMs.set(from.speedMs.subarray(0, from.length), at);
  to.headingDeg.set(from.headingDeg.subarray(0, from.length), at);
}
