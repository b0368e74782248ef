import { DELIMITERS, fieldsOf, type FileMapping, type UploadKind } from "@/domain/upload";
import { CsvScanner } from "../csv/csv-scanner";
import { fieldText } from "../csv/field";
import { byteOf } from "../fields";
import { unusable } from "../unusable";
import { columnsFromHeader } from "./synonyms";

export interface CsvShape {
  delimiter: FileMapping["delimiter"];
  hasHeader: boolean;
  header: string[];
  /** Rows of data, without the header. */
  rows: string[][];
  /** Field to column number, as far as it can be told. */
  columns: Record<string, number>;
}

const MAX_ROWS = 5000;
const NUMBER = /^[+-]?\d+([.,]\d+)?$/;

/** What a person has settled already and is not to be guessed. */
export interface SettledShape {
  delimiter?: FileMapping["delimiter"];
  hasHeader?: boolean;
}

/** Delimiter, header and columns of the beginning of a CSV file; `isWhole` if nothing was cut off. */
export function csvShape(bytes: Uint8Array, kind: UploadKind, isWhole: boolean, settled: SettledShape = {}): CsvShape {
  const delimiters = settled.delimiter === undefined ? DELIMITERS : [settled.delimiter];
  const shapes = delimiters.map((delimiter) => shapeWith(delimiter, bytes, kind, isWhole, settled.hasHeader)).filter((shape) => shape !== null);
  if (shapes.length === 0) throw unusable("The file is empty.");
  return shapes.reduce((a, b) => (merit(b) > merit(a) ? b : a));
}

function shapeWith(
  delimiter: FileMapping["delimiter"],
  bytes: Uint8Array,
  kind: UploadKind,
  isWhole: boolean,
  settledHeader: boolean | undefined,
): CsvShape | null {
  const rows: string[][] = [];
  const scanner = new CsvScanner(byteOf(delimiter), (row) => {
    if (rows.length <= MAX_ROWS && !row.broken) rows.push(Array.from({ length: row.count }, (_, i) => fieldText(row, i)));
  });
  scanner.push(bytes);
  // A row that was cut off would be taken for a short one.
  if (isWhole || rows.length === 0) scanner.finish();
  const [first, ...rest] = rows;
  if (first === undefined) return null;
  const named = columnsFromHeader(first, kind);
  const looksLikeHeader = Object.keys(named).length >= 2 || (rest.length > 0 && !first.some((cell) => NUMBER.test(cell)));
  const hasHeader = settledHeader ?? looksLikeHeader;
  if (hasHeader) return { delimiter, hasHeader, header: first, rows: rest, columns: named };
  const header = first.map((_, i) => `column ${i + 1}`);
  return { delimiter, hasHeader, header, rows, columns: columnsByPlace(first.length, kind) };
}

/** Without a header the columns are taken to stand in the order of the description. */
function columnsByPlace(count: number, kind: UploadKind): Record<string, number> {
  return Object.fromEntries(fieldsOf(kind, "csv").slice(0, count).map((field, i) => [field, i]));
}

/** Known names count most, then rows of equal width, then width. */
function merit(shape: CsvShape): number {
  const width = shape.header.length;
  if (width < 2) return 0;
  const rows = shape.rows.slice(0, 200);
  const even = rows.length === 0 ? 1 : rows.filter((row) => row.length === width).length / rows.length;
  const known = shape.hasHeader ? Object.keys(shape.columns).length : 0;
  return known * 100 + even * 50 + Math.min(width, 20);
}
