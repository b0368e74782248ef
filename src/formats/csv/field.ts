import type { CsvRow } from "./csv-scanner";

const decoder = new TextDecoder("utf-8");

export const MAX_REJECT_TEXT = 200;

/** Field as text, trimmed, doubled quotation marks undone; empty where the row has no such column. */
export function fieldText(row: CsvRow, column: number): string {
  if (column < 0 || column >= row.count || column >= row.starts.length) return "";
  const text = decoder.decode(row.bytes.subarray(row.starts[column], row.ends[column])).trim();
  return row.doubled[column] === 1 ? text.replaceAll('""', '"') : text;
}

/** The row as it stands, cut at 200 characters. */
export function rowText(row: CsvRow): string {
  // A character of UTF-8 has at most four bytes.
  const end = Math.min(row.rowEnd, row.rowStart + MAX_REJECT_TEXT * 4);
  return decoder.decode(row.bytes.subarray(row.rowStart, end)).replace(/\r$/, "").slice(0, MAX_REJECT_TEXT);
}
