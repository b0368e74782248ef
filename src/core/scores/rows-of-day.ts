import type { CatalogueIndex } from "./catalogue-index";
import type { ScreenDay } from "./types";

/** Where a catalogue's movements and legs stand in a slice: row by dense number, -1 for those without. */
export interface RowsOfDay {
  movement: Int32Array;
  leg: Int32Array;
}

const known = new WeakMap<ScreenDay, { index: CatalogueIndex; rows: RowsOfDay }>();

/** Looked up once for a day and catalogue as long as both objects live. O(rows). */
export function rowsOfDay(day: ScreenDay, index: CatalogueIndex): RowsOfDay {
  const earlier = known.get(day);
  if (earlier?.index === index) return earlier.rows;
  const rows = {
    movement: placesOf(day.movement, index.movementByKey, index.movements.length),
    leg: placesOf(day.leg, index.legByKey, index.legs.length),
  };
  known.set(day, { index, rows });
  return rows;
}

function placesOf(keys: Uint32Array, unitByKey: ReadonlyMap<number, number>, units: number): Int32Array {
  const rows = new Int32Array(units).fill(-1);
  for (let row = 0; row < keys.length; row++) {
    const unit = unitByKey.get(keys[row]);
    if (unit !== undefined) rows[unit] = row;
  }
  return rows;
}

/** First entry of the ascending stretch from..to whose quarter is not before the given one; `to` where none is. O(log). */
export function entryAt(quarters: Uint8Array, from: number, to: number, quarter: number): number {
  let low = from;
  let high = to;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (quarters[middle] < quarter) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Row of a key in an ascending column; -1 where it has none. O(log). */
export function rowOfKey(keys: Uint32Array, key: number): number {
  let low = 0;
  let high = keys.length - 1;
  while (low <= high) {
    const middle = (low + high) >> 1;
    if (keys[middle] === key) return middle;
    if (keys[middle] < key) low = middle + 1;
    else high = middle - 1;
  }
  return -1;
}
