import { latAt, lonAt, northM, planeAt, type Plane } from "@/core/geometry/plane";
import { MATCHING } from "@/core/match/matching";
import { SEGMENT, type Segments } from "@/core/match/segments";

/**
 * Square cells of about MATCHING.cellM that lie near a link, in a hash table, so that memory goes with the length of the
 * streets and not with the size of the country. The cell whose record is at r holds the runs runs[records[r + CELL.first]]
 * to runs[records[r + CELL.end] - 1], ascending: all segments that come within MATCHING.sideLimitM of any place in it.
 * A run is a number of successive segments of one link, see firstOf and countOf.
 */
export interface LinkGrid extends Frame {
  /** Records of CELL.width by open addressing; a free one has an end of 0. */
  records: Int32Array;
  /** Records less one: a power of two less one. */
  mask: number;
  runs: Int32Array;
}

const COUNT_BITS = 8;
const MOST_IN_RUN = (1 << COUNT_BITS) - 1;

/** First segment of a run, below 8 million: links of some 100,000 junctions. */
export function firstOf(run: number): number {
  return run >> COUNT_BITS;
}

export function countOf(run: number): number {
  return run & MOST_IN_RUN;
}

/** Fields of a cell's record. */
export const CELL = Object.freeze({ row: 0, column: 1, first: 2, end: 3, width: 4 });

interface Frame {
  south: number;
  west: number;
  rowsPerLat: number;
  columnsPerLon: number;
  /** Columns round the globe. */
  round: number;
}

/** Builds the grid of links that are drawn in the planes of their home junctions. O(total length of the links). */
export function createLinkGrid(segments: Segments, home: Int32Array, planes: readonly Plane[]): LinkGrid {
  const frame = frameOf(planes);
  const list = createCellList();
  const cells: number[] = [];
  const found: number[] = [];
  // Run of each cell that may yet grow.
  const open: number[] = [];
  for (let n = 0; n < segments.count; n++) {
    visitCells(segments, n, planes[home[segments.link[n]]], frame, (row, column) => {
      const cell = list.numberOf(row, column);
      const last = open[cell] ?? -1;
      const run = last >= 0 ? found[last] : 0;
      const goesOn = last >= 0 && firstOf(run) + countOf(run) === n && countOf(run) < MOST_IN_RUN && segments.link[n] === segments.link[n - 1];
      if (goesOn) found[last] += 1;
      else {
        open[cell] = found.length;
        cells.push(cell);
        found.push((n << COUNT_BITS) + 1);
      }
    });
  }
  const ends = new Int32Array(list.count());
  for (const cell of cells) ends[cell] += 1;
  for (let c = 1; c < ends.length; c++) ends[c] += ends[c - 1];
  const runs = new Int32Array(cells.length);
  const next = Int32Array.from(ends, (_, c) => (c > 0 ? ends[c - 1] : 0));
  for (let k = 0; k < cells.length; k++) runs[next[cells[k]]++] = found[k];
  return { ...frame, ...list.pack(ends), runs };
}

/** Index of the record of a position's cell; -1 where no link is near, or the position is none. O(1). */
export function cellAt(grid: LinkGrid, lat: number, lon: number): number {
  const { records, mask } = grid;
  const row = Math.floor((lat - grid.south) * grid.rowsPerLat);
  const east = lon - grid.west;
  const column = Math.floor((east < 0 ? east + 360 : east) * grid.columnsPerLon);
  for (let slot = hashOf(row, column) & mask; ; slot = (slot + 1) & mask) {
    const at = slot * CELL.width;
    if (records[at + CELL.end] === 0) return -1;
    if (records[at + CELL.row] === row && records[at + CELL.column] === column) return at;
  }
}

interface CellList {
  /** A number from 0, by first mention: cells along a street stand together. */
  numberOf(row: number, column: number): number;
  count(): number;
  /** Records of all cells, the entries of cell c ending at ends[c]. */
  pack(ends: Int32Array): { records: Int32Array; mask: number };
}

function createCellList(): CellList {
  const known = new Map<number, Map<number, number>>();
  const row: number[] = [];
  const column: number[] = [];
  return {
    numberOf(r, c) {
      let ofRow = known.get(r);
      if (!ofRow) known.set(r, (ofRow = new Map()));
      let cell = ofRow.get(c);
      if (cell === undefined) {
        cell = row.length;
        ofRow.set(c, cell);
        row.push(r);
        column.push(c);
      }
      return cell;
    },
    count: () => row.length,
    pack(ends) {
      let size = 2;
      while (size < 1.5 * (row.length + 1)) size *= 2;
      const records = new Int32Array(size * CELL.width);
      for (let cell = 0; cell < row.length; cell++) {
        let slot = hashOf(row[cell], column[cell]) & (size - 1);
        while (records[slot * CELL.width + CELL.end] !== 0) slot = (slot + 1) & (size - 1);
        records.set([row[cell], column[cell], cell > 0 ? ends[cell - 1] : 0, ends[cell]], slot * CELL.width);
      }
      return { records, mask: size - 1 };
    },
  };
}

function hashOf(row: number, column: number): number {
  const mixed = Math.imul(row, 0x9e3779b1) ^ Math.imul(column, 0x85ebca6b);
  return mixed ^ (mixed >>> 15);
}

function frameOf(planes: readonly Plane[]): Frame {
  const south = planes.reduce((least, plane) => Math.min(least, plane.lat0), 90);
  const north = planes.reduce((most, plane) => Math.max(most, plane.lat0), -90);
  const west = planes.reduce((least, plane) => Math.min(least, plane.lon0), 180);
  const middle = planeAt(planes.length > 0 ? (south + north) / 2 : 0, 0);
  const round = Math.max(1, Math.round((360 * middle.metresPerLon) / MATCHING.cellM));
  return { south, west, rowsPerLat: middle.metresPerLat / MATCHING.cellM, columnsPerLon: round / 360, round };
}

/** Calls `visit` for each cell whose middle lies within the side limit and half a cell's diagonal of the segment. */
function visitCells(
  { columns }: Segments, n: number, plane: Plane, frame: Frame, visit: (row: number, column: number) => void,
): void {
  const at = n * SEGMENT.width;
  const [x, y, ux, uy, length] = columns.subarray(at, at + SEGMENT.startM);
  const highM = plane.metresPerLat / frame.rowsPerLat;
  const wideM = plane.metresPerLon / frame.columnsPerLon;
  const reachM = MATCHING.sideLimitM + Math.hypot(highM, wideM) / 2;
  const rowAt = (north: number): number => Math.floor((latAt(plane, north) - frame.south) * frame.rowsPerLat);
  const columnAt = (east: number): number => Math.floor((lonAt(plane, east) - frame.west) * frame.columnsPerLon);
  const lastRow = rowAt(Math.max(y, y + length * uy) + reachM);
  const lastColumn = columnAt(Math.max(x, x + length * ux) + reachM);
  for (let row = rowAt(Math.min(y, y + length * uy) - reachM); row <= lastRow; row++) {
    const dy = northM(plane, frame.south + (row + 0.5) / frame.rowsPerLat) - y;
    for (let column = columnAt(Math.min(x, x + length * ux) - reachM); column <= lastColumn; column++) {
      const dx = (frame.west + (column + 0.5) / frame.columnsPerLon - plane.lon0) * plane.metresPerLon - x;
      const across = dx * uy - dy * ux;
      const along = dx * ux + dy * uy;
      const beyond = along - Math.min(length, Math.max(0, along));
      if (across * across + beyond * beyond <= reachM * reachM) visit(row, ((column % frame.round) + frame.round) % frame.round);
    }
  }
}
