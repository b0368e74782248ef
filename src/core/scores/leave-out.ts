import { emptyScreenDay, QUEUE_TABLE, TRAVERSAL_TABLE, type SliceTable } from "./screen-day-columns";
import type { ScreenDay } from "./types";

/** The slice without the movements and legs for which the questions say no. O(size of the slice). */
export function keepInScreenDay(day: ScreenDay, keepMovement: (key: number) => boolean, keepLeg: (key: number) => boolean): ScreenDay {
  const movements = rowsWhere(day, TRAVERSAL_TABLE, keepMovement);
  const legs = rowsWhere(day, QUEUE_TABLE, keepLeg);
  const out = emptyScreenDay(day.day, day.methodVersion, {
    movements: movements.length,
    traversals: entriesOf(day, TRAVERSAL_TABLE, movements),
    legs: legs.length,
    legQuarters: entriesOf(day, QUEUE_TABLE, legs),
  });
  copyRows(day, TRAVERSAL_TABLE, movements, out);
  copyRows(day, QUEUE_TABLE, legs, out);
  return out;
}

function rowsWhere(day: ScreenDay, { key }: SliceTable, keep: (key: number) => boolean): number[] {
  const rows: number[] = [];
  day[key].forEach((value, row) => {
    if (keep(value)) rows.push(row);
  });
  return rows;
}

function entriesOf(day: ScreenDay, { start }: SliceTable, rows: number[]): number {
  return rows.reduce((sum, row) => sum + day[start][row + 1] - day[start][row], 0);
}

function copyRows(from: ScreenDay, { key, start, columns }: SliceTable, rows: number[], to: ScreenDay): void {
  let at = 0;
  rows.forEach((row, k) => {
    const [first, end] = [from[start][row], from[start][row + 1]];
    to[key][k] = from[key][row];
    for (const name of columns) to[name].set(from[name].subarray(first, end), at);
    at += end - first;
    to[start][k + 1] = at;
  });
}
