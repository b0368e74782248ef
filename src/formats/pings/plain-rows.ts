import type { FileMapping } from "@/domain/upload";
import { POWERS } from "../csv/parse-number";
import { byteOf, columnOf } from "../fields";
import { FIELD, type PingJudge } from "./ping-judge";

const LF = 10;
const CR = 13;
const SPACE = 32;
const QUOTE = 34;
const PLUS = 43;
const MINUS = 45;
const ZERO = 48;

/** In the order of FIELD; the first four are needed. */
const NAMES = ["vehicle_id", "timestamp", "lat", "lon", "speed", "heading"] as const;
const NEEDED = 4;
const SKIPPED = -1;
/** Longer rows, and digits, are left to the careful reader, so that no loop here looks beyond the bytes. */
const MOST_BYTES = 1024;
const MOST_DIGITS = 15;

/**
 * Reads rows as nearly all rows are: no quotation marks, no spaces around values, as many columns as the first row, every
 * value plain and good. It cuts and reads in one pass what the careful way does in three, with the same result; it says
 * no to every other row, good or bad, which must then be read the careful way.
 */
export class PlainRows {
  /** Bytes of the vehicle's name in the row that was read. */
  nameStart = 0;
  nameEnd = 0;
  /** By column: one of FIELD, or SKIPPED. */
  private readonly fields: Int8Array;
  private readonly delimiter: number;
  private readonly decimal: number;
  private readonly epochMs: number;
  private readonly values = new Float64Array(6);

  constructor(mapping: FileMapping, columns: number, private readonly judge: PingJudge) {
    this.fields = new Int8Array(columns).fill(SKIPPED);
    NAMES.forEach((name, field) => {
      const column = columnOf(mapping, name);
      if (column >= 0 && column < columns) this.fields[column] = field;
    });
    this.delimiter = byteOf(mapping.delimiter);
    this.decimal = byteOf(mapping.decimal);
    this.epochMs = mapping.timeFormat === "epoch_ms" ? 1 : mapping.timeFormat === "epoch_s" ? 1000 : 0;
  }

  /** Whether rows of so many columns can be read this way: all needed fields are there, and no column stands for two. */
  static suits(mapping: FileMapping, columns: number): boolean {
    const known = Object.values(mapping.columns);
    const isThere = (name: string): boolean => columnOf(mapping, name) >= 0 && columnOf(mapping, name) < columns;
    const isPlain = mapping.decimal !== mapping.delimiter && new Set(known).size === known.length;
    return isPlain && NAMES.slice(0, NEEDED).every(isThere);
  }

  /** Where the row after the one at `from` begins, the judge holding its ping; -1 where the row is not plain, or not whole. */
  read(bytes: Uint8Array, from: number): number {
    if (bytes.length - from < MOST_BYTES) return -1;
    const { fields, delimiter, values } = this;
    const last = fields.length - 1;
    values[FIELD.speed] = NaN;
    values[FIELD.heading] = NaN;
    let at = from;
    for (let column = 0; column <= last; column++) {
      const field = fields[column];
      const isNumber = field > FIELD.time || (field === FIELD.time && this.epochMs > 0);
      at = isNumber ? this.readNumber(bytes, at, field) : this.readText(bytes, at, from + MOST_BYTES, field);
      if (at < 0) return -1;
      if (column < last && bytes[at++] !== delimiter) return -1;
    }
    if (bytes[at] === CR) at += 1;
    return bytes[at] === LF && this.accept() ? at + 1 : -1;
  }

  /** Reads digits with at most one decimal mark, as parseNumber does; where they end, -1 for anything else. An empty optional value stays NaN. */
  private readNumber(bytes: Uint8Array, from: number, field: number): number {
    const { decimal } = this;
    let at = from;
    const sign = bytes[at];
    if (sign === MINUS || sign === PLUS) at += 1;
    const first = at;
    let mantissa = 0;
    let digit = bytes[at] - ZERO;
    for (; digit >= 0 && digit <= 9; digit = bytes[++at] - ZERO) mantissa = mantissa * 10 + digit;
    let digits = at - first;
    if (digits > MOST_DIGITS) return -1;
    if (bytes[at] === decimal) {
      const mark = at;
      digit = bytes[++at] - ZERO;
      for (; digit >= 0 && digit <= 9; digit = bytes[++at] - ZERO) mantissa = mantissa * 10 + digit;
      const decimals = at - mark - 1;
      digits += decimals;
      if (digits > MOST_DIGITS) return -1;
      if (decimals > 0) mantissa /= POWERS[decimals];
    }
    if (digits > 0) this.values[field] = sign === MINUS ? -mantissa : mantissa;
    else if (at > from || field <= FIELD.lon) return -1;
    return at;
  }

  private readText(bytes: Uint8Array, from: number, end: number, field: number): number {
    const { delimiter } = this;
    if (bytes[from] === QUOTE) return -1;
    let at = from;
    while (at < end && bytes[at] !== delimiter && bytes[at] !== LF) at += 1;
    if (at >= end) return -1;
    const textEnd = bytes[at] === LF && bytes[at - 1] === CR && at > from ? at - 1 : at;
    if (field === SKIPPED) return textEnd;
    if (textEnd === from || bytes[from] <= SPACE || bytes[textEnd - 1] <= SPACE) return -1;
    if (field === FIELD.vehicle) {
      this.nameStart = from;
      this.nameEnd = textEnd;
    } else this.values[FIELD.time] = this.judge.timeOf(bytes, from, textEnd);
    return textEnd;
  }

  private accept(): boolean {
    const { values, judge } = this;
    const tMs = this.epochMs > 0 ? Math.round(values[FIELD.time] * this.epochMs) : values[FIELD.time];
    return judge.take(this.nameEnd - this.nameStart, tMs, values[FIELD.lat], values[FIELD.lon], values[FIELD.speed], values[FIELD.heading]) === null;
  }
}
