import type { PingColumns } from "@/core/types";
import { emptyColumns } from "@/formats/pings/ping-columns";

/** Pings farther than this from some junctions take no part in their legs or in those of their neighbours, degrees. */
const NEAR_LAT_DEG = 0.02;
const CELLS_PER_ROW = 100_000;

export interface Place {
  lat: number;
  lon: number;
}

/** Keeps the pings of the cells, NEAR_LAT_DEG high, that the places lie in or beside. */
export function nearOnly(points: readonly Place[]): (batch: PingColumns) => PingColumns {
  const lonDeg = NEAR_LAT_DEG / Math.max(0.05, Math.cos((points[0].lat * Math.PI) / 180));
  const cellOf = (lat: number, lon: number, up = 0, right = 0) => (Math.floor(lat / NEAR_LAT_DEG) + up) * CELLS_PER_ROW + Math.floor(lon / lonDeg) + right;
  const steps = [-1, 0, 1];
  const cells = new Set(points.flatMap(({ lat, lon }) => steps.flatMap((up) => steps.map((right) => cellOf(lat, lon, up, right)))));
  return (batch) => chosenRows(batch, (i) => cells.has(cellOf(batch.lat[i], batch.lon[i])));
}

function chosenRows(batch: PingColumns, isChosen: (i: number) => boolean): PingColumns {
  const chosen: number[] = [];
  for (let i = 0; i < batch.length; i++) if (isChosen(i)) chosen.push(i);
  const some = emptyColumns(chosen.length);
  some.length = chosen.length;
  for (const name of ["vehicle", "tMs", "lat", "lon", "speedMs", "headingDeg"] as const) {
    const [from, to] = [batch[name], some[name]];
    for (let k = 0; k < chosen.length; k++) to[k] = from[chosen[k]];
  }
  return some;
}
