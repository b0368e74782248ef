import { indexCatalogue, type CatalogueIndex } from "./catalogue-index";
import type { Catalogue, ScreenDay } from "./types";

export const QUARTERS = 96;
/** Number of movements and legs that the catalogue does not list any more. */
const NO_NUMBER = 255;

/**
 * A slice in the order in which scores are added up: by junction, then quarter of an hour, so that a window of the day
 * is one stretch of a junction's traversals, and one of its legs' quarters. Movements and legs stand by their number
 * among those that the catalogue lists for the junction.
 */
export interface DayByJunction {
  /** Days since 1970-01-01 of the local calendar day. */
  day: number;
  /** The catalogue by which numbers are given. */
  index: CatalogueIndex;
  /** Keys of the junctions that were passed, ascending; one row each. */
  junction: Uint32Array;
  /** Row by dense junction; -1 for those without. */
  rowOf: Int32Array;
  /** Traversals of row r in quarter q: from passedStart[96 r + q] to passedStart[96 r + q + 1]. */
  passedStart: Uint32Array;
  /** Number of the movement, stops and code of the delay, 8, 8 and 16 bits of one word: one line of cache instead of three. */
  passed: Uint32Array;
  /** Hash of the vehicle, folded to two bytes: of 50 vehicles two look alike once in 54 samples. */
  vehicle: Uint16Array;
  /** Leg quarters, as traversals. */
  queueStart: Uint32Array;
  ofLeg: Uint8Array;
  reach: Uint16Array;
  reachEstimate: Uint16Array;
  spilled: Uint16Array;
  observed: Uint16Array;
  /** Whether the slice has movements or legs that the catalogue did not list: they are left out. */
  hasUnlisted: boolean;
}

export const numberOf = (word: number): number => word >>> 24;
export const stopsOf = (word: number): number => (word >>> 16) & 0xff;
export const delayCodeOf = (word: number): number => word & 0xffff;

/** Slices ready to be scored. */
export function daysByJunction(days: readonly ScreenDay[], catalogue: Catalogue): DayByJunction[] {
  return days.map((day) => dayByJunction(day, indexCatalogue(catalogue)));
}

/** RangeError where more than 254 movements or legs belong to one junction. O(size of the slice). */
export function dayByJunction(day: ScreenDay, index: CatalogueIndex): DayByJunction {
  const movements = rowsByJunction(day.movement, (key) => placeOfMovement(index, key));
  const legs = rowsByJunction(day.leg, (key) => placeOfLeg(index, key));
  const junctions = [...new Set([...movements.keys(), ...legs.keys()])].sort((a, b) => a - b);
  const passed = arrange(junctions, movements, day.movementStart, day.quarter);
  const queued = arrange(junctions, legs, day.legStart, day.legQuarter);
  const pick = (column: Uint16Array): Uint16Array => {
    const picked = new Uint16Array(queued.source.length);
    for (let k = 0; k < picked.length; k++) picked[k] = column[queued.source[k]];
    return picked;
  };
  return {
    day: day.day,
    index,
    junction: Uint32Array.from(junctions, (j) => index.junctions[j]),
    rowOf: rowsOf(junctions, index),
    passedStart: passed.start,
    ...passages(day, passed),
    queueStart: queued.start,
    ofLeg: queued.number,
    reach: pick(day.reach),
    reachEstimate: pick(day.reachEstimate),
    spilled: pick(day.spilled),
    observed: pick(day.observed),
    hasUnlisted: passed.rows < day.movement.length || queued.rows < day.leg.length,
  };
}

/** Bytes of all columns. */
export function bytesOfDay(day: DayByJunction): number {
  return Object.values(day).reduce((sum: number, column) => sum + (ArrayBuffer.isView(column) ? column.byteLength : 0), 0);
}

interface Place {
  junction: number;
  number: number;
}

/** Dense junction of a movement and its number there; undefined for one that the catalogue does not list. */
export function placeOfMovement(index: CatalogueIndex, key: number): Place | undefined {
  const unit = index.movementByKey.get(key);
  return unit === undefined ? undefined : { junction: index.junctionOf[unit], number: unit - index.junctionOffset[index.junctionOf[unit]] };
}

export function placeOfLeg(index: CatalogueIndex, key: number): Place | undefined {
  const unit = index.legByKey.get(key);
  return unit === undefined ? undefined : { junction: index.junctionOfLeg[unit], number: unit - index.junctionLegOffset[index.junctionOfLeg[unit]] };
}

/**
 * Gives a day the numbers of another catalogue, in place; what that one does not list counts no more. O(junctions)
 * where no junction has got or lost a movement or leg, else O(traversals of those that have).
 */
export function renumberDay(day: DayByJunction, index: CatalogueIndex): void {
  if (day.index === index) return;
  const former = day.index;
  const dense: number[] = [];
  day.junction.forEach((key, row) => {
    const [from, to] = [former.junctionByKey.get(key) as number, index.junctionByKey.get(key)];
    dense.push(to ?? -1);
    const movements = numbersIn(former.movements, former.junctionOffset, from, (moved) => (to === undefined ? undefined : placeOfMovement(index, moved)));
    if (movements) {
      for (let i = day.passedStart[row * QUARTERS]; i < day.passedStart[(row + 1) * QUARTERS]; i++) {
        day.passed[i] = ((movements[numberOf(day.passed[i])] << 24) | (day.passed[i] & 0xffffff)) >>> 0;
      }
    }
    const legs = numbersIn(former.legs, former.junctionLegOffset, from, (moved) => (to === undefined ? undefined : placeOfLeg(index, moved)));
    if (legs) for (let k = day.queueStart[row * QUARTERS]; k < day.queueStart[(row + 1) * QUARTERS]; k++) day.ofLeg[k] = legs[day.ofLeg[k]];
  });
  day.rowOf = rowsOf(dense, index);
  day.index = index;
}

/** New number by former one; null where all are the same. */
function numbersIn(units: readonly { key: number }[], offset: Uint32Array, junction: number, placeOf: (key: number) => Place | undefined): Uint8Array | null {
  const numbers = new Uint8Array(NO_NUMBER + 1).fill(NO_NUMBER);
  let isSame = true;
  for (let unit = offset[junction]; unit < offset[junction + 1]; unit++) {
    const former = unit - offset[junction];
    numbers[former] = placeOf(units[unit].key)?.number ?? NO_NUMBER;
    if (numbers[former] !== former) isSame = false;
  }
  return isSame ? null : numbers;
}

function rowsOf(junctions: readonly number[], index: CatalogueIndex): Int32Array {
  const rowOf = new Int32Array(index.junctions.length).fill(-1);
  junctions.forEach((junction, row) => {
    if (junction >= 0) rowOf[junction] = row;
  });
  return rowOf;
}

interface NumberedRow {
  /** Row of the slice. */
  row: number;
  number: number;
}

/** Rows of the slice by dense junction. */
function rowsByJunction(keys: Uint32Array, placeOf: (key: number) => Place | undefined): Map<number, NumberedRow[]> {
  const rows = new Map<number, NumberedRow[]>();
  keys.forEach((key, row) => {
    const place = placeOf(key);
    if (place === undefined) return;
    if (place.number >= NO_NUMBER) throw new RangeError(`A junction has more than ${NO_NUMBER} movements or legs: they cannot be told apart.`);
    const list = rows.get(place.junction);
    if (list) list.push({ row, number: place.number });
    else rows.set(place.junction, [{ row, number: place.number }]);
  });
  return rows;
}

interface Arranged {
  rows: number;
  /** Where the entries of each junction and quarter begin. */
  start: Uint32Array;
  /** For each entry: the number of its movement or leg, and where it stood in the slice. */
  number: Uint8Array;
  source: Uint32Array;
}

/** Counts, then places: entries keep their order within a row. */
function arrange(junctions: readonly number[], rowsOfJunction: ReadonlyMap<number, NumberedRow[]>, rowStarts: Uint32Array, quarters: Uint8Array): Arranged {
  const lists = junctions.map((junction) => rowsOfJunction.get(junction) ?? []);
  const start = new Uint32Array(junctions.length * QUARTERS + 1);
  lists.forEach((list, j) => {
    for (const { row } of list) for (let i = rowStarts[row]; i < rowStarts[row + 1]; i++) start[j * QUARTERS + quarters[i] + 1] += 1;
  });
  for (let k = 1; k < start.length; k++) start[k] += start[k - 1];
  const entries = start[start.length - 1];
  const [number, source] = [new Uint8Array(entries), new Uint32Array(entries)];
  const next = start.slice();
  lists.forEach((list, j) => {
    for (const one of list) {
      for (let i = rowStarts[one.row]; i < rowStarts[one.row + 1]; i++) {
        const at = next[j * QUARTERS + quarters[i]]++;
        number[at] = one.number;
        source[at] = i;
      }
    }
  });
  return { rows: lists.reduce((sum, list) => sum + list.length, 0), start, number, source };
}

function passages(day: ScreenDay, { source, number }: Arranged): { passed: Uint32Array; vehicle: Uint16Array } {
  const passed = new Uint32Array(source.length);
  const vehicle = new Uint16Array(source.length);
  for (let k = 0; k < source.length; k++) {
    const i = source[k];
    passed[k] = ((number[k] << 24) | (day.stops[i] << 16) | day.delay[i]) >>> 0;
    vehicle[k] = day.vehicle[i] ^ (day.vehicle[i] >>> 16);
  }
  return { passed, vehicle };
}
