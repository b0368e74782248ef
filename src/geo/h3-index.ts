import { cellToLatLng, getHexagonEdgeLengthAvg, gridDisk, latLngToCell, UNITS } from "h3-js";
import { eastM, northM, planeAt } from "@/core/geometry/plane";
import type { ClaimIndex, Claims, JunctionIndex } from "@/core/index/junction-index";
import { createCellRaster, PIXEL_HALF_DIAGONAL_M, type CellRaster } from "./cell-raster";

const RESOLUTION = 11;
/** From a cell's centre to its far corner, with room for cells larger than the average and for half a pixel's diagonal. */
const CELL_REACH_M = getHexagonEdgeLengthAvg(RESOLUTION, UNITS.m) * 1.25 + PIXEL_HALF_DIAGONAL_M;

/** Disks that are remembered at most, some 20 MB. */
const MOST_DISKS = 50_000;

/** A cell around a disc's centre, with the middle of it. */
interface NearCell {
  cell: string;
  lat: number;
  lon: number;
}

/** The cells within some rings of a cell. */
type Disks = (cell: string, rings: number) => readonly NearCell[];

/** The index over H3 cells of resolution 11 (flat to flat about 50 m). What it learned of cells serves every claim. */
export function createH3Index(): JunctionIndex {
  const disks = createDisks();
  const raster = createCellRaster((lat, lon) => latLngToCell(lat, lon, RESOLUTION));
  return { claim: (claims) => claimCells(claims, disks, raster) };
}

/** Neighbouring discs begin from the same cells again and again, and h3-js is slow to answer. */
function createDisks(): Disks {
  const known = new Map<string, readonly NearCell[]>();
  const places = new Map<string, NearCell>();
  const forget = (): void => {
    known.clear();
    places.clear();
  };
  const placeOf = (cell: string): NearCell => {
    let place = places.get(cell);
    if (!place) {
      const [lat, lon] = cellToLatLng(cell);
      place = { cell, lat, lon };
      places.set(cell, place);
    }
    return place;
  };
  return (cell, rings) => {
    const key = `${cell} ${rings}`;
    let disk = known.get(key);
    if (!disk) {
      if (known.size >= MOST_DISKS) forget();
      disk = gridDisk(cell, rings).map(placeOf);
      known.set(key, disk);
    }
    return disk;
  };
}

function claimCells(claims: Claims, disks: Disks, raster: CellRaster): ClaimIndex {
  const slots = new Map<number, number>();
  const owners: number[][] = [];
  for (let i = 0; i < claims.length; i++) {
    const plane = planeAt(claims.lat[i], claims.lon[i]);
    const reach = claims.radiusM[i] + CELL_REACH_M;
    const rings = Math.ceil((reach / getHexagonEdgeLengthAvg(RESOLUTION, UNITS.m) + 1) / 1.5);
    for (const { cell, lat, lon } of disks(latLngToCell(claims.lat[i], claims.lon[i], RESOLUTION), rings)) {
      const x = eastM(plane, lon);
      const y = northM(plane, lat);
      if (x * x + y * y > reach * reach) continue;
      const number = raster.numberOf(cell);
      let slot = slots.get(number);
      if (slot === undefined) {
        slot = owners.length;
        slots.set(number, slot);
        owners.push([]);
      }
      const list = owners[slot];
      if (list[list.length - 1] !== claims.owner[i]) list.push(claims.owner[i]);
    }
  }
  return { ...pack(owners), find: finder(claims, slots, raster) };
}

function pack(owners: number[][]): { offsets: Uint32Array; owners: Uint32Array } {
  const offsets = new Uint32Array(owners.length + 1);
  const unique = owners.map((list) => [...new Set(list)].sort((a, b) => a - b));
  unique.forEach((list, slot) => (offsets[slot + 1] = offsets[slot] + list.length));
  return { offsets, owners: Uint32Array.from(unique.flat()) };
}

/** Looks a position's slot up by the number of its cell; cells that were numbered later than the claims are nobody's. */
function finder(claims: Claims, slots: Map<number, number>, raster: CellRaster): (lat: number, lon: number) => number {
  const { south, north, west, east, marginM } = boundsOf(claims);
  const plane = planeAt((south + north) / 2, west);
  const [marginLat, marginLon] = [marginM / plane.metresPerLat, marginM / plane.metresPerLon];
  const box = { south: south - marginLat, north: north + marginLat, west: west - marginLon, east: east + marginLon };
  const slotOf = new Int32Array(raster.count()).fill(-1);
  for (const [cell, slot] of slots) slotOf[cell] = slot;
  return (lat, lon) => {
    const isInside = lat >= box.south && lat <= box.north && lon >= box.west && lon <= box.east;
    if (!isInside) return -1;
    const cell = raster.cellAt(lat, lon);
    return cell < slotOf.length ? slotOf[cell] : -1;
  };
}

function boundsOf(claims: Claims): { south: number; north: number; west: number; east: number; marginM: number } {
  const box = { south: Infinity, north: -Infinity, west: Infinity, east: -Infinity, marginM: 0 };
  for (let i = 0; i < claims.length; i++) {
    box.south = Math.min(box.south, claims.lat[i]);
    box.north = Math.max(box.north, claims.lat[i]);
    box.west = Math.min(box.west, claims.lon[i]);
    box.east = Math.max(box.east, claims.lon[i]);
    box.marginM = Math.max(box.marginM, claims.radiusM[i] + 2 * CELL_REACH_M);
  }
  return box;
}
