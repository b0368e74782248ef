import { stringify } from "csv-stringify/sync";

export type Cell = string | number | null;

const ROWS_AT_ONCE = 500;

/** CSV with one header line: LF, comma, RFC 4180 quoting; null and NaN are empty cells. Text that a spreadsheet would run is disarmed. */
export async function* csvText(header: readonly string[], rows: Iterable<readonly Cell[]> | AsyncIterable<readonly Cell[]>): AsyncGenerator<string> {
  yield stringify([[...header]]);
  let waiting: string[][] = [];
  for await (const row of rows) {
    waiting.push(row.map(cellText));
    if (waiting.length < ROWS_AT_ONCE) continue;
    yield stringify(waiting);
    waiting = [];
  }
  if (waiting.length > 0) yield stringify(waiting);
}

const PLAIN_NUMBER = /^[+-]?\d+(\.\d+)?$/;

/** A leading = + - @ or control character makes spreadsheets run the cell; an apostrophe before it stops them. A number is none. */
function cellText(cell: Cell): string {
  if (cell === null) return "";
  if (typeof cell === "number") return Number.isFinite(cell) ? String(cell) : "";
  return /^[=+\-@\t\r\n]/.test(cell) && !PLAIN_NUMBER.test(cell) ? `'${cell}` : cell;
}
