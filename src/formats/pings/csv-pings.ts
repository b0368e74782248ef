import type { FileMapping } from "@/domain/upload";
import { CsvScanner, type CsvRow, type PlainReader } from "../csv/csv-scanner";
import { fieldText, rowText } from "../csv/field";
import { byteOf, columnOf, trimmedEnd, trimmedStart } from "../fields";
import type { RowTally } from "../row-tally";
import type { VehicleNames } from "../vehicle-names";
import type { PingBatcher } from "./ping-batcher";
import { PingJudge } from "./ping-judge";
import { PlainRows } from "./plain-rows";

const FIELDS = ["vehicle_id", "timestamp", "lat", "lon", "speed", "heading"] as const;

/** A scanner that turns rows of CSV into pings. */
export function csvPings(mapping: FileMapping, names: VehicleNames, batcher: PingBatcher, tally: RowTally): CsvScanner {
  const columns = Int32Array.from(FIELDS, (field) => columnOf(mapping, field));
  const judge = new PingJudge(mapping);
  let expected = 0;
  let isHeader = mapping.hasHeader;
  const plainReader = (count: number): PlainReader | null => {
    if (!PlainRows.suits(mapping, count)) return null;
    const plain = new PlainRows(mapping, count, judge);
    return (bytes, from) => {
      const next = plain.read(bytes, from);
      if (next < 0) return -1;
      tally.accept();
      batcher.add(names.intern(bytes, plain.nameStart, plain.nameEnd), judge.tMs, judge.lat, judge.lon, judge.speedMs, judge.headingDeg);
      return next;
    };
  };
  const readRowByRow = (row: CsvRow): void => {
    if (expected === 0) expected = row.count;
    if (isHeader) {
      isHeader = false;
      return;
    }
    const reason = hasColumns(row, expected) ? readRow(row, columns, judge) : "columns";
    if (reason !== null) {
      tally.reject(row.line, reason, rowText(row));
      return;
    }
    tally.accept();
    const vehicle =
      row.doubled[columns[0]] === 1
        ? names.internText(fieldText(row, columns[0]))
        : names.intern(row.bytes, judge.spans[0], judge.spans[1]);
    batcher.add(vehicle, judge.tMs, judge.lat, judge.lon, judge.speedMs, judge.headingDeg);
  };
  return new CsvScanner(byteOf(mapping.delimiter), readRowByRow, plainReader);
}

function readRow(row: CsvRow, columns: Int32Array, judge: PingJudge) {
  const { bytes, starts, ends } = row;
  const spans = judge.spans;
  for (let f = 0; f < columns.length; f += 1) {
    const column = columns[f];
    if (column < 0 || column >= row.count) {
      spans[2 * f] = 0;
      spans[2 * f + 1] = 0;
      continue;
    }
    const start = trimmedStart(bytes, starts[column], ends[column]);
    spans[2 * f] = start;
    spans[2 * f + 1] = trimmedEnd(bytes, start, ends[column]);
  }
  return judge.judge(bytes);
}

/** Columns beyond those of the first row are let through while they are empty: some programs end every row with a delimiter. */
export function hasColumns(row: CsvRow, expected: number): boolean {
  if (row.broken || row.count < expected) return false;
  for (let i = expected; i < row.count && i < row.starts.length; i += 1) if (row.ends[i] > row.starts[i]) return false;
  return true;
}
