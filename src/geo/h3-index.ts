import { cellToLatLng, getHexagonEdgeLengthAvg, gridDisk, latLngToCell, UNITS } from "h3-js";
import { eastM, northM, planeAt } from "@/core/geometry/plane";
import type { ClaimIndex, Claims, JunctionIndex } from "@/core/index/junction-index";
import { createCellRaster, PIXEL_HALF_DIAGONAL_M, type CellRaster } from "./cell-raster";

const RESOLUTION = 11;
/** From a cell's centre to its far corner, with room for cells larger than the average and for half a pixel's diagonal. */
const CELL_REACH_M = getHexagonEdgeLengthAvg(RESOLUTION, UNITS.m) * 1.25 + PIXEL_HALF_DIAGONAL_M;

/** Disks that are remembered at most, some 60 MB. */
const MOST_DISKS = 20_000;
/** Disks are made in steps of so many rings, so that claims of about the same radius share them. */
const RING_STEP = 4;

/** Cells around a cell, with the middle of each; `number` as the raster counts them. */
interface Disk {
  number: Int32Array;
  lat: Float64Array;
  lon: Float64Array;
}

/** The cells within at least some rings of a cell. */
type Disks = (cell: string, rings: number) => Disk;

/** The index over H3 cells of resolution 11 (flat to flat about 50 m). What it learned of cells serves every claim. */
export function createH3Index(): JunctionIndex {
  const raster = createCellRaster((lat, lon) => latLngToCell(lat, lon, RESOLUTION));
  const disks = createDisks(raster);
  return { claim: (claims) => claimCells(claims, disks, raster) };
}

/** Claim after claim begins from the same cells, and h3-js is slow to answer. */
function createDisks(raster: CellRaster): Disks {
  const known = new Map<string, Disk>();
  const middles = new Map<number, [number, number]>();
  const middleOf = (cell: string, number: number): [number, number] => {
    let middle = middles.get(number);
    if (!middle) middles.set(number, (middle = cellToLatLng(cell) as [number, number]));
    return middle;
  };
  return (cell, rings) => {
    const steps = Math.ceil(rings / RING_STEP);
    const key = `${cell} ${steps}`;
    let disk = known.get(key);
    if (!disk) {
      if (known.size >= MOST_DISKS) known.clear();
      const cells = gridDisk(cell, steps * RING_STEP);
      const number = Int32Array.from(cells, raster.numberOf);
      const places = cells.map((near, n) => middleOf(near, number[n]));
      disk = { number, lat: Float64Array.from(places, ([lat]) => lat), lon: Float64Array.from(places, ([, lon]) => lon) };
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
    const disk = disks(latLngToCell(claims.lat[i], claims.lon[i], RESOLUTION), rings);
    for (let n = 0; n < disk.number.length; n++) {
      const x = eastM(plane, disk.lon[n]);
      const y = northM(plane, disk.lat[n]);
      if (x * x + y * y > reach * reach) continue;
      let slot = slots.get(disk.number[n]);
      if (slot === undefined) {
        slot = owners.length;
        slots.set(disk.number[n], slot);
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
