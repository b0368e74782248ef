import type { ScreenDay } from "./types";

type ColumnName = Exclude<keyof ScreenDay, "day" | "methodVersion">;
type ColumnArray = typeof Uint8Array | typeof Uint16Array | typeof Uint32Array;

/** One of the two tables of a slice: rows by key, entries by row. */
export interface SliceTable {
  key: "movement" | "leg";
  start: "movementStart" | "legStart";
  /** The column by which the entries of a row are ordered first. */
  quarter: "quarter" | "legQuarter";
  /** The widest first, so that views into bytes need no padding. */
  columns: readonly ColumnName[];
}

export const TRAVERSAL_TABLE = {
  key: "movement",
  start: "movementStart",
  quarter: "quarter",
  columns: ["vehicle", "delay", "quarter", "stops"],
} as const satisfies SliceTable;

export const QUEUE_TABLE = {
  key: "leg",
  start: "legStart",
  quarter: "legQuarter",
  columns: ["reach", "reachEstimate", "spilled", "observed", "legQuarter"],
} as const satisfies SliceTable;

/** Every column of a slice, with the array that holds it. */
const ARRAYS = {
  movement: Uint32Array,
  movementStart: Uint32Array,
  vehicle: Uint32Array,
  delay: Uint16Array,
  quarter: Uint8Array,
  stops: Uint8Array,
  leg: Uint32Array,
  legStart: Uint32Array,
  reach: Uint16Array,
  reachEstimate: Uint16Array,
  spilled: Uint16Array,
  observed: Uint16Array,
  legQuarter: Uint8Array,
} as const satisfies Record<ColumnName, ColumnArray>;

export interface SliceSize {
  movements: number;
  traversals: number;
  legs: number;
  legQuarters: number;
}

export function sizeOf(day: ScreenDay): SliceSize {
  return { movements: day.movement.length, traversals: day.delay.length, legs: day.leg.length, legQuarters: day.reach.length };
}

function lengthOf(name: ColumnName, size: SliceSize): number {
  if (name === "movement") return size.movements;
  if (name === "movementStart") return size.movements + 1;
  if (name === "leg") return size.legs;
  if (name === "legStart") return size.legs + 1;
  return (TRAVERSAL_TABLE.columns as readonly ColumnName[]).includes(name) ? size.traversals : size.legQuarters;
}

/** The widest first. */
const NAMES = (Object.keys(ARRAYS) as ColumnName[]).sort((a, b) => ARRAYS[b].BYTES_PER_ELEMENT - ARRAYS[a].BYTES_PER_ELEMENT);

export function bytesOf(size: SliceSize): number {
  return NAMES.reduce((sum, name) => sum + ARRAYS[name].BYTES_PER_ELEMENT * lengthOf(name, size), 0);
}

/** All columns of a slice in one stretch of bytes, which begins at a multiple of four: views, no copies. */
export function columnsIn(buffer: ArrayBufferLike, from: number, size: SliceSize): Omit<ScreenDay, "day" | "methodVersion"> {
  let at = from;
  const views = NAMES.map((name) => {
    const length = lengthOf(name, size);
    const view = new ARRAYS[name](buffer as ArrayBuffer, at, length);
    at += view.byteLength;
    return [name, view] as const;
  });
  return Object.fromEntries(views) as unknown as Omit<ScreenDay, "day" | "methodVersion">;
}

/** A slice of that size, all zeros. */
export function emptyScreenDay(day: number, methodVersion: number, size: SliceSize): ScreenDay {
  return { day, methodVersion, ...columnsIn(new ArrayBuffer(bytesOf(size)), 0, size) };
}

/** Copies every column. */
export function copyColumns(from: Omit<ScreenDay, "day" | "methodVersion">, to: Omit<ScreenDay, "day" | "methodVersion">): void {
  for (const name of NAMES) to[name].set(from[name]);
}
