import { bytesOf, columnsIn, copyColumns, sizeOf } from "./screen-day-columns";
import type { ScreenDay } from "./types";

/** "TMSD" in little-endian order. */
const MAGIC = 0x44534d54;
const VERSION = 2;
const HEADER_BYTES = 32;

/** Header (magic, version, method version, day, sizes), then the columns, little-endian. */
export function encodeScreenDay(day: ScreenDay): Uint8Array<ArrayBuffer> {
  const size = sizeOf(day);
  const bytes = new Uint8Array(HEADER_BYTES + bytesOf(size));
  const header = new DataView(bytes.buffer);
  [MAGIC, VERSION, day.methodVersion, 0, size.movements, size.traversals, size.legs, size.legQuarters].forEach((word, k) => header.setUint32(4 * k, word, true));
  header.setInt32(12, day.day, true);
  copyColumns(day, columnsIn(bytes.buffer, HEADER_BYTES, size));
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
  const size = { movements: word(4), traversals: word(5), legs: word(6), legQuarters: word(7) };
  const expected = HEADER_BYTES + bytesOf(size);
  if (aligned.byteLength !== expected) throw new TypeError(`Screen day of ${aligned.byteLength} bytes, expected ${expected}.`);
  return { day: header.getInt32(12, true), methodVersion: word(2), ...columnsIn(aligned.buffer, aligned.byteOffset + HEADER_BYTES, size) };
}
