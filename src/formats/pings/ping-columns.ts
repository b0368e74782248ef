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
