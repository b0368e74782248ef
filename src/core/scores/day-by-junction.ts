import type { CatalogueIndex, UnitsInOrder } from "./catalogue-index";
import { packStarts, QUARTERS, startAt, type Starts } from "./starts";
import type { ScreenDay } from "./types";

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
  /** Where the traversals of each row and quarter begin. */
  passedStart: Starts;
  /** Number of the movement, stops and code of the delay, 8, 8 and 16 bits of one word: one line of cache instead of three. */
  passed: Uint32Array;
  /** Hash of the vehicle, folded to two bytes: of 50 vehicles two look alike once in 54 samples. */
  vehicle: Uint16Array;
  /** Leg quarters, as traversals. */
  queueStart: Starts;
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

/** RangeError where more than 254 movements or legs belong to one junction. O(size of the slice). */
export function dayByJunction(day: ScreenDay, index: CatalogueIndex): DayByJunction {
  const movements = placeRows(day.movement, index.movementsInOrder, index.junctionOf, index.junctionOffset);
  const legs = placeRows(day.leg, index.legsInOrder, index.junctionOfLeg, index.junctionLegOffset);
  const junctions = index.junctions.flatMap((_, j) => (hasRows(movements, j) || hasRows(legs, j) ? [j] : []));
  return {
    day: day.day,
    index,
    junction: Uint32Array.from(junctions, (j) => index.junctions[j]),
    rowOf: rowsOf(junctions, index),
    ...arrangePassages(day, junctions, movements),
    ...arrangeQueues(day, junctions, legs),
    hasUnlisted: movements.rows.length < day.movement.length || legs.rows.length < day.leg.length,
  };
}

/** Bytes of all columns. */
export function bytesOfDay(day: DayByJunction): number {
  const columns = [...Object.values(day), ...Object.values(day.passedStart), ...Object.values(day.queueStart)];
  return columns.reduce((sum: number, column) => sum + (ArrayBuffer.isView(column) ? column.byteLength : 0), 0);
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
      for (let i = startAt(day.passedStart, row, 0); i < startAt(day.passedStart, row, QUARTERS); i++) {
        day.passed[i] = ((movements[numberOf(day.passed[i])] << 24) | (day.passed[i] & 0xffffff)) >>> 0;
      }
    }
    const legs = numbersIn(former.legs, former.junctionLegOffset, from, (moved) => (to === undefined ? undefined : placeOfLeg(index, moved)));
    if (legs) for (let k = startAt(day.queueStart, row, 0); k < startAt(day.queueStart, row, QUARTERS); k++) day.ofLeg[k] = legs[day.ofLeg[k]];
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

/** Rows of a slice in order of their junction. */
interface PlacedRows {
  /** Rows of dense junction j: from start[j] to start[j + 1]. */
  start: Uint32Array;
  rows: Uint32Array;
  /** Number of each at its junction. */
  numbers: Uint8Array;
}

function hasRows({ start }: PlacedRows, junction: number): boolean {
  return start[junction + 1] > start[junction];
}

/** Keys of slice and catalogue both ascend: they meet in one walk. */
function placeRows(keys: Uint32Array, { keys: listed, units }: UnitsInOrder, junctionOf: Uint32Array, offset: Uint32Array): PlacedRows {
  const unitOf = new Int32Array(keys.length).fill(-1);
  const start = new Uint32Array(offset.length);
  let found = 0;
  for (let row = 0, at = 0; row < keys.length; row++) {
    while (at < listed.length && listed[at] < keys[row]) at += 1;
    if (listed[at] !== keys[row]) continue;
    unitOf[row] = units[at];
    start[junctionOf[units[at]] + 1] += 1;
    found += 1;
  }
  for (let j = 1; j < start.length; j++) start[j] += start[j - 1];
  const [rows, numbers, next] = [new Uint32Array(found), new Uint8Array(found), start.slice()];
  unitOf.forEach((unit, row) => {
    if (unit < 0) return;
    const number = unit - offset[junctionOf[unit]];
    if (number >= NO_NUMBER) throw new RangeError(`A junction has more than ${NO_NUMBER} movements or legs: they cannot be told apart.`);
    const at = next[junctionOf[unit]]++;
    rows[at] = row;
    numbers[at] = number;
  });
  return { start, rows, numbers };
}

/** Where the entries of each junction and quarter begin. */
function startsOf(junctions: readonly number[], { start: first, rows }: PlacedRows, rowStart: Uint32Array, quarters: Uint8Array): Uint32Array {
  const start = new Uint32Array(junctions.length * QUARTERS + 1);
  junctions.forEach((junction, j) => {
    for (let r = first[junction]; r < first[junction + 1]; r++) {
      for (let i = rowStart[rows[r]]; i < rowStart[rows[r] + 1]; i++) start[j * QUARTERS + quarters[i] + 1] += 1;
    }
  });
  for (let k = 1; k < start.length; k++) start[k] += start[k - 1];
  return start;
}

function arrangePassages(day: ScreenDay, junctions: readonly number[], placed: PlacedRows): Pick<DayByJunction, "passedStart" | "passed" | "vehicle"> {
  const { movementStart, quarter, stops, delay, vehicle: hash } = day;
  const start = startsOf(junctions, placed, movementStart, quarter);
  const passed = new Uint32Array(start[start.length - 1]);
  const vehicle = new Uint16Array(passed.length);
  const next = start.slice();
  junctions.forEach((junction, j) => {
    for (let r = placed.start[junction]; r < placed.start[junction + 1]; r++) {
      const [row, number] = [placed.rows[r], placed.numbers[r]];
      for (let i = movementStart[row]; i < movementStart[row + 1]; i++) {
        const at = next[j * QUARTERS + quarter[i]]++;
        passed[at] = (number << 24) | (stops[i] << 16) | delay[i];
        vehicle[at] = hash[i] ^ (hash[i] >>> 16);
      }
    }
  });
  return { passedStart: packStarts(start), passed, vehicle };
}

type Queues = Pick<DayByJunction, "queueStart" | "ofLeg" | "reach" | "reachEstimate" | "spilled" | "observed">;

function arrangeQueues(day: ScreenDay, junctions: readonly number[], placed: PlacedRows): Queues {
  const { legStart, legQuarter } = day;
  const start = startsOf(junctions, placed, legStart, legQuarter);
  const length = start[start.length - 1];
  const [reach, reachEstimate, spilled, observed] = Array.from({ length: 4 }, () => new Uint16Array(length));
  const ofLeg = new Uint8Array(length);
  const next = start.slice();
  junctions.forEach((junction, j) => {
    for (let r = placed.start[junction]; r < placed.start[junction + 1]; r++) {
      const [row, number] = [placed.rows[r], placed.numbers[r]];
      for (let k = legStart[row]; k < legStart[row + 1]; k++) {
        const at = next[j * QUARTERS + legQuarter[k]]++;
        ofLeg[at] = number;
        reach[at] = day.reach[k];
        reachEstimate[at] = day.reachEstimate[k];
        spilled[at] = day.spilled[k];
        observed[at] = day.observed[k];
      }
    }
  });
  return { queueStart: packStarts(start), ofLeg, reach, reachEstimate, spilled, observed };
}
