import { planeAt, type Plane } from "@/core/geometry/plane";
import type { Frame } from "@/core/legs/frame";
import type { Trips } from "@/core/pings/trips";

/** Pings sorted into square cells: those of cell c are order[offsets[c]] to order[offsets[c + 1] - 1]. */
export interface PingGrid {
  south: number;
  west: number;
  latStep: number;
  lonStep: number;
  rows: number;
  columns: number;
  offsets: Uint32Array;
  order: Uint32Array;
  trips: Trips;
}

const CELL_M = 15;
const MOST_CELLS = 1.2e7;
/** Standing pings of one trip closer than this tell nothing new, m. */
const SAME_PLACE_M = 4;

/** Grid of the pings within `marginM` of the junctions' bounding box; repeated standing pings are thinned. O(pings). */
export function createPingGrid(trips: Trips, frame: Frame, marginM: number): PingGrid {
  const lats = frame.junctions.map((junction) => junction.lat);
  const lons = frame.junctions.map((junction) => junction.lon);
  const plane = planeAt(middle(lats), middle(lons));
  const marginLat = marginM / plane.metresPerLat;
  const marginLon = marginM / plane.metresPerLon;
  const south = least(lats) - marginLat;
  const west = least(lons) - marginLon;
  const high = (-least(lats.map((v) => -v)) + marginLat - south) * plane.metresPerLat;
  const wide = (-least(lons.map((v) => -v)) + marginLon - west) * plane.metresPerLon;
  const cellM = Math.max(CELL_M, Math.sqrt((high * wide) / MOST_CELLS));
  const grid: PingGrid = {
    south,
    west,
    latStep: cellM / plane.metresPerLat,
    lonStep: cellM / plane.metresPerLon,
    rows: Math.ceil(high / cellM) || 0,
    columns: Math.ceil(wide / cellM) || 0,
    offsets: new Uint32Array(0),
    order: new Uint32Array(0),
    trips,
  };
  fill(grid, plane);
  return grid;
}

function fill(grid: PingGrid, plane: Plane): void {
  const { trips } = grid;
  const cell = new Int32Array(trips.length).fill(-1);
  const offsets = new Uint32Array(grid.rows * grid.columns + 1);
  let kept = 0;
  for (let k = 0; k < trips.count; k++) {
    let last = -1;
    for (let i = trips.tripOffset[k]; i < trips.tripOffset[k + 1]; i++) {
      if (last >= 0 && trips.speedMs[i] < 1.4 && isSamePlace(trips, last, i, plane)) continue;
      last = i;
      const row = Math.floor((trips.lat[i] - grid.south) / grid.latStep);
      const column = Math.floor((trips.lon[i] - grid.west) / grid.lonStep);
      if (!(row >= 0 && row < grid.rows && column >= 0 && column < grid.columns)) continue;
      cell[i] = row * grid.columns + column;
      offsets[cell[i] + 1] += 1;
      kept += 1;
    }
  }
  for (let c = 1; c < offsets.length; c++) offsets[c] += offsets[c - 1];
  const next = offsets.slice(0, offsets.length - 1);
  const order = new Uint32Array(kept);
  for (let i = 0; i < trips.length; i++) if (cell[i] >= 0) order[next[cell[i]]++] = i;
  grid.offsets = offsets;
  grid.order = order;
}

function isSamePlace(trips: Trips, a: number, b: number, plane: Plane): boolean {
  const dx = (trips.lon[b] - trips.lon[a]) * plane.metresPerLon;
  const dy = (trips.lat[b] - trips.lat[a]) * plane.metresPerLat;
  return dx * dx + dy * dy < SAME_PLACE_M * SAME_PLACE_M;
}

/** Pings in the cells that touch a square around a point; writes their numbers to `out` and returns how many fit. */
export function pingsAround(grid: PingGrid, lat: number, lon: number, radiusM: number, plane: Plane, out: Uint32Array): number {
  const dLat = radiusM / plane.metresPerLat;
  const dLon = radiusM / plane.metresPerLon;
  const row0 = Math.max(0, Math.floor((lat - dLat - grid.south) / grid.latStep));
  const row1 = Math.min(grid.rows - 1, Math.floor((lat + dLat - grid.south) / grid.latStep));
  const column0 = Math.max(0, Math.floor((lon - dLon - grid.west) / grid.lonStep));
  const column1 = Math.min(grid.columns - 1, Math.floor((lon + dLon - grid.west) / grid.lonStep));
  let count = 0;
  for (let row = row0; row <= row1; row++) {
    const from = grid.offsets[row * grid.columns + column0];
    const to = column1 >= column0 ? grid.offsets[row * grid.columns + column1 + 1] : from;
    for (let n = from; n < to && count < out.length; n++) out[count++] = grid.order[n];
  }
  return count;
}

const least = (values: number[]): number => values.reduce((a, b) => Math.min(a, b), Infinity);
const middle = (values: number[]): number => (least(values) - least(values.map((v) => -v))) / 2;
