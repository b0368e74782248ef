import type { FileMapping } from "@/domain/upload";
import { parseNumber } from "./csv/parse-number";
import { unusable } from "./unusable";

/** What stands for "not given" in an optional number. */
const MISSING = new Set(["null", "nan", "na", "n/a", "none", "-"]);
const decoder = new TextDecoder("latin1");

/** An optional number: NaN where none is given, Infinity where something stands there that is no number. */
export function optionalNumber(bytes: Uint8Array, start: number, end: number, decimal: number): number {
  if (start >= end) return NaN;
  const value = parseNumber(bytes, start, end, decimal);
  if (value === value) return value;
  const isMissing = end - start <= 4 && MISSING.has(decoder.decode(bytes.subarray(start, end)).toLowerCase());
  return isMissing ? NaN : Infinity;
}

export function trimmedStart(bytes: Uint8Array, start: number, end: number): number {
  let at = start;
  while (at < end && bytes[at] <= 32) at += 1;
  return at;
}

export function trimmedEnd(bytes: Uint8Array, start: number, end: number): number {
  let at = end;
  while (at > start && bytes[at - 1] <= 32) at -= 1;
  return at;
}

/** Exactly 0, 0 is what receivers write before they know where they are. */
export function isPosition(lat: number, lon: number): boolean {
  return lat >= -90 && lat <= 90 && lon >= -180 && lon <= 180 && !(lat === 0 && lon === 0);
}

/** Column number of a field in a CSV file, -1 where it is not mapped. */
export function columnOf(mapping: FileMapping, field: string): number {
  const column = mapping.columns[field];
  return typeof column === "number" ? column : -1;
}

/** Name of the property that holds a field in a GeoJSON file; null where it is not mapped. */
export function propertyOf(mapping: FileMapping, field: string): string | null {
  const property = mapping.columns[field];
  return typeof property === "string" ? property : null;
}

export function requireFields(mapping: FileMapping, fields: readonly string[]): void {
  const missing = fields.filter((field) => mapping.columns[field] === undefined);
  if (missing.length === 0) return;
  const what = mapping.format === "csv" ? "column" : "property";
  const names = missing.join(", ");
  throw unusable(`The file has no ${what} for ${names}. Name the ${what} or choose it in the mapping.`);
}

export function byteOf(mark: string): number {
  return mark.charCodeAt(0);
}
