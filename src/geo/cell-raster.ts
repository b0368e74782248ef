/** Side of a pixel, m: h3-js answers 1.2 million times a second, too slow for each ping. */
const PIXEL_M = 24;
export const PIXEL_HALF_DIAGONAL_M = PIXEL_M * Math.SQRT1_2;
const TILE_BITS = 6;
const TILE_PIXELS = 1 << TILE_BITS;
const METRES_PER_LAT = 111_195;
const ROWS_PER_LAT = METRES_PER_LAT / PIXEL_M;
const TILES_ROUND = 1 << 15;
const UNSEEN = -1;

/** Numbers cells from 0 and remembers, by pixel of the globe, which cell a place lies in. */
export interface CellRaster {
  /** Number of the cell at the centre of the pixel that a position lies in. O(1). */
  cellAt(lat: number, lon: number): number;
  numberOf(cell: string): number;
  /** Cells numbered so far. */
  count(): number;
}

/** `cellOf` names the cell of a position; it is asked once for each pixel. A tile of 1.5 km takes 16 kB. */
export function createCellRaster(cellOf: (lat: number, lon: number) => string): CellRaster {
  const numbers = new Map<string, number>();
  const tiles = new Map<number, Int32Array>();
  const columnsPerLon = new Float64Array(Math.ceil((180 * ROWS_PER_LAT) / TILE_PIXELS) + 1);
  let lastKey = -1;
  let lastTile = new Int32Array(0);

  function numberOf(cell: string): number {
    let number = numbers.get(cell);
    if (number === undefined) {
      number = numbers.size;
      numbers.set(cell, number);
    }
    return number;
  }

  /** Pixels of a row of tiles are about square. */
  function columnsOf(tileRow: number): number {
    if (columnsPerLon[tileRow] === 0) {
      const lat = ((tileRow + 0.5) * TILE_PIXELS) / ROWS_PER_LAT - 90;
      columnsPerLon[tileRow] = Math.max(1 / 360, ROWS_PER_LAT * Math.cos((lat * Math.PI) / 180));
    }
    return columnsPerLon[tileRow];
  }

  function tileOf(key: number): Int32Array<ArrayBuffer> {
    let tile = tiles.get(key) as Int32Array<ArrayBuffer> | undefined;
    if (!tile) {
      tile = new Int32Array(TILE_PIXELS * TILE_PIXELS).fill(UNSEEN);
      tiles.set(key, tile);
    }
    return tile;
  }

  return {
    cellAt(lat, lon) {
      const row = Math.floor((lat + 90) * ROWS_PER_LAT);
      const tileRow = row >> TILE_BITS;
      const perLon = columnsOf(tileRow);
      const column = Math.floor((lon + 180) * perLon);
      const key = tileRow * TILES_ROUND + (column >> TILE_BITS);
      if (key !== lastKey) {
        lastKey = key;
        lastTile = tileOf(key);
      }
      const pixel = ((row & (TILE_PIXELS - 1)) << TILE_BITS) | (column & (TILE_PIXELS - 1));
      if (lastTile[pixel] === UNSEEN) lastTile[pixel] = numberOf(cellOf((row + 0.5) / ROWS_PER_LAT - 90, (column + 0.5) / perLon - 180));
      return lastTile[pixel];
    },
    numberOf,
    count: () => numbers.size,
  };
}
