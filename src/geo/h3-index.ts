import { cellToLatLng, getHexagonEdgeLengthAvg, gridDisk, latLngToCell, UNITS } from "h3-js";
import { eastM, northM, planeAt } from "@/core/geometry/plane";
import type { ClaimIndex, Claims, JunctionIndex } from "@/core/index/junction-index";

const RESOLUTION = 11;
/** Side of a pixel of the raster that remembers cells, m: h3-js answers 1.2 million times a second, too slow for each ping. */
const PIXEL_M = 12;
const TILE_PIXELS = 64;
const UNSEEN = -2;
/** From a cell's centre to its far corner, with room for cells larger than the average and for half a pixel's diagonal. */
const CELL_REACH_M = getHexagonEdgeLengthAvg(RESOLUTION, UNITS.m) * 1.25 + PIXEL_M;

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
  return { claim: (claims) => claimCells(claims, disks) };
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

function claimCells(claims: Claims, disks: Disks): ClaimIndex {
  const slots = new Map<string, number>();
  const owners: number[][] = [];
  for (let i = 0; i < claims.length; i++) {
    const plane = planeAt(claims.lat[i], claims.lon[i]);
    const reach = claims.radiusM[i] + CELL_REACH_M;
    const rings = Math.ceil((reach / getHexagonEdgeLengthAvg(RESOLUTION, UNITS.m) + 1) / 1.5);
    for (const { cell, lat, lon } of disks(latLngToCell(claims.lat[i], claims.lon[i], RESOLUTION), rings)) {
      if (Math.hypot(eastM(plane, lon), northM(plane, lat)) > reach) continue;
      let slot = slots.get(cell);
      if (slot === undefined) {
        slot = owners.length;
        slots.set(cell, slot);
        owners.push([]);
      }
      const list = owners[slot];
      if (list[list.length - 1] !== claims.owner[i]) list.push(claims.owner[i]);
    }
  }
  return { ...pack(owners), find: createRaster(claims, slots) };
}

function pack(owners: number[][]): { offsets: Uint32Array; owners: Uint32Array } {
  const offsets = new Uint32Array(owners.length + 1);
  const unique = owners.map((list) => [...new Set(list)].sort((a, b) => a - b));
  unique.forEach((list, slot) => (offsets[slot + 1] = offsets[slot] + list.length));
  return { offsets, owners: Uint32Array.from(unique.flat()) };
}

/** Looks a position up through tiles of pixels, each pixel holding the slot of the cell at its centre. */
function createRaster(claims: Claims, slots: Map<string, number>): (lat: number, lon: number) => number {
  const box = boundsOf(claims);
  const plane = planeAt((box.south + box.north) / 2, box.west);
  const latStep = PIXEL_M / plane.metresPerLat;
  const lonStep = PIXEL_M / plane.metresPerLon;
  const south = box.south - box.marginM / plane.metresPerLat;
  const west = box.west - box.marginM / plane.metresPerLon;
  const rows = Math.ceil((box.north + box.marginM / plane.metresPerLat - south) / latStep / TILE_PIXELS) || 0;
  const columns = Math.ceil((box.east + box.marginM / plane.metresPerLon - west) / lonStep / TILE_PIXELS) || 0;
  const tiles = new Map<number, Int32Array>();

  return (lat, lon) => {
    const row = Math.floor((lat - south) / latStep);
    const column = Math.floor((lon - west) / lonStep);
    const tileRow = Math.floor(row / TILE_PIXELS);
    const tileColumn = Math.floor(column / TILE_PIXELS);
    const inside = tileRow >= 0 && tileRow < rows && tileColumn >= 0 && tileColumn < columns;
    if (!inside) return -1;
    const key = tileRow * columns + tileColumn;
    let tile = tiles.get(key);
    if (!tile) {
      tile = new Int32Array(TILE_PIXELS * TILE_PIXELS).fill(UNSEEN);
      tiles.set(key, tile);
    }
    const pixel = (row - tileRow * TILE_PIXELS) * TILE_PIXELS + (column - tileColumn * TILE_PIXELS);
    if (tile[pixel] === UNSEEN) {
      const cell = latLngToCell(south + (row + 0.5) * latStep, west + (column + 0.5) * lonStep, RESOLUTION);
      tile[pixel] = slots.get(cell) ?? -1;
    }
    return tile[pixel];
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
