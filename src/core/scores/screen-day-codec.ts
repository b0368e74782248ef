import type { ScreenDay } from "./types";

/** "TMSD" in little-endian order. */
const MAGIC = 0x44534d54;
const VERSION = 1;
const HEADER_BYTES = 32;

/** Bytes that `encodeScreenDay` makes of a slice: four-byte columns first, so that views need no padding. */
function byteLength(cells: number, traversals: number, legQuarters: number): number {
  return HEADER_BYTES + 4 * (2 * cells + 1 + 2 * traversals + 5 * legQuarters) + cells + traversals + legQuarters;
}

/** Header (magic, version, method version, day, sizes), then the columns, little-endian. */
export function encodeScreenDay(day: ScreenDay): Uint8Array<ArrayBuffer> {
  const traversals = day.delayS.length;
  const bytes = new Uint8Array(byteLength(day.cells, traversals, day.legQuarters));
  const header = new DataView(bytes.buffer);
  [MAGIC, VERSION, day.methodVersion, 0, day.cells, traversals, day.legQuarters, 0].forEach((word, k) => header.setUint32(4 * k, word, true));
  header.setInt32(12, day.day, true);
  const copy = views(bytes.buffer, day.cells, traversals, day.legQuarters);
  for (const name of COLUMNS) copy[name].set(day[name]);
  return bytes;
}

/**
 * Views into the bytes, no copy (one where they do not start at a multiple of four). TypeError when they are no
 * slice, of another version, or cut short.
 */
export function decodeScreenDay(bytes: Uint8Array): ScreenDay {
  if (bytes.byteLength < HEADER_BYTES) throw new TypeError(`Not a screen day: ${bytes.byteLength} bytes are less than its header.`);
  const aligned = bytes.byteOffset % 4 === 0 ? bytes : bytes.slice();
  const header = new DataView(aligned.buffer, aligned.byteOffset, HEADER_BYTES);
  const word = (k: number): number => header.getUint32(4 * k, true);
  if (word(0) !== MAGIC) throw new TypeError("Not a screen day.");
  if (word(1) !== VERSION) throw new TypeError(`Screen day of version ${word(1)}, expected ${VERSION}.`);
  const [cells, traversals, legQuarters] = [word(4), word(5), word(6)];
  const expected = byteLength(cells, traversals, legQuarters);
  if (aligned.byteLength !== expected) throw new TypeError(`Screen day of ${aligned.byteLength} bytes, expected ${expected}.`);
  return {
    day: header.getInt32(12, true),
    methodVersion: word(2),
    cells,
    legQuarters,
    ...views(aligned.buffer, cells, traversals, legQuarters, aligned.byteOffset),
  };
}

const COLUMNS = [
  "movement",
  "offset",
  "delayS",
  "vehicle",
  "leg",
  "reachM",
  "reachEstimateM",
  "spilledS",
  "observedS",
  "quarter",
  "stops",
  "legQuarter",
] as const;

function views(buffer: ArrayBufferLike, cells: number, traversals: number, legs: number, start = 0): Pick<ScreenDay, (typeof COLUMNS)[number]> {
  let at = start + HEADER_BYTES;
  const take = (bytes: number): number => {
    at += bytes;
    return at - bytes;
  };
  return {
    movement: new Uint32Array(buffer, take(4 * cells), cells),
    offset: new Uint32Array(buffer, take(4 * (cells + 1)), cells + 1),
    delayS: new Float32Array(buffer, take(4 * traversals), traversals),
    vehicle: new Uint32Array(buffer, take(4 * traversals), traversals),
    leg: new Uint32Array(buffer, take(4 * legs), legs),
    reachM: new Float32Array(buffer, take(4 * legs), legs),
    reachEstimateM: new Float32Array(buffer, take(4 * legs), legs),
    spilledS: new Float32Array(buffer, take(4 * legs), legs),
    observedS: new Float32Array(buffer, take(4 * legs), legs),
    quarter: new Uint8Array(buffer, take(cells), cells),
    stops: new Uint8Array(buffer, take(traversals), traversals),
    legQuarter: new Uint8Array(buffer, take(legs), legs),
  };
}
