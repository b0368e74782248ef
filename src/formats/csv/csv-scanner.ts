import { unusable } from "../unusable";

const LF = 10;
const CR = 13;
const QUOTE = 34;

/** A row longer than this is no row of a data file. */
export const MAX_ROW_BYTES = 2 ** 20;
/** A quoted field that stays open for longer is a stray quotation mark. */
const MAX_OPEN_QUOTE_BYTES = 65_536;
/** Columns beyond this one are counted but not kept. */
export const MAX_COLUMNS = 200;

/** The row under the scanner: valid inside the callback only. */
export interface CsvRow {
  bytes: Uint8Array;
  /** Field i is bytes starts[i] to ends[i], without its quotation marks. */
  starts: Int32Array;
  ends: Int32Array;
  /** 1 where the field holds doubled quotation marks. */
  doubled: Uint8Array;
  count: number;
  /** Line on which the row begins, from 1. */
  line: number;
  rowStart: number;
  rowEnd: number;
  /** The quotation marks make no sense: the fields are not to be trusted. */
  broken: boolean;
}

/** Takes the row that begins at `from` by itself and says where the next one begins; -1 leaves the row to the scanner. */
export type PlainReader = (bytes: Uint8Array, from: number) => number;

/**
 * Cuts bytes into rows and fields (RFC 4180; LF or CRLF; byte order mark skipped; empty lines skipped).
 * Where the input is cut does not change the result. A quoted field may span lines only if the row then
 * has as many columns as the first one; otherwise the line alone is broken and the next one is read afresh.
 */
export class CsvScanner {
  private carry: Uint8Array = new Uint8Array(0);
  private line = 1;
  private atStart = true;
  private readPlain: PlainReader | null = null;
  private columns = 0;
  /** Line breaks inside the quoted fields of the row at hand. */
  private quotedLines = 0;
  private readonly row: CsvRow = {
    bytes: this.carry,
    starts: new Int32Array(MAX_COLUMNS),
    ends: new Int32Array(MAX_COLUMNS),
    doubled: new Uint8Array(MAX_COLUMNS),
    count: 0,
    line: 1,
    rowStart: 0,
    rowEnd: 0,
    broken: false,
  };

  constructor(
    private readonly delimiter: number,
    private readonly onRow: (row: CsvRow) => void,
    /** Asked first for each row, once the first one told the number of columns. It must take one whole line, or none. */
    private readonly plain: ((columns: number) => PlainReader | null) | null = null,
  ) {}

  push(chunk: Uint8Array): void {
    // A plain view, never a Buffer, keeps the loops on one kind of object.
    const plain = new Uint8Array(chunk.buffer, chunk.byteOffset, chunk.length);
    this.scan(this.carry.length === 0 ? plain : joined(this.carry, plain), false);
  }

  /** Lines that were read to their end; after `finish` the last one too. */
  get lines(): number {
    return this.line - 1;
  }

  finish(): void {
    this.scan(this.carry, true);
    this.carry = new Uint8Array(0);
  }

  private scan(bytes: Uint8Array, last: boolean): void {
    let at = 0;
    if (this.atStart) {
      if (bytes.length < 3 && !last) {
        this.carry = new Uint8Array(bytes);
        return;
      }
      if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) at = 3;
      this.atStart = false;
    }
    this.row.bytes = bytes;
    while (at < bytes.length) {
      if (this.readPlain !== null) at = this.scanPlain(this.readPlain, bytes, at);
      if (at >= bytes.length) break;
      const next = this.scanRow(at, last);
      if (next < 0) break;
      at = next;
    }
    if (bytes.length - at > MAX_ROW_BYTES) this.refuseLongRow();
    // A copy: the caller may use its buffer again.
    this.carry = new Uint8Array(bytes.subarray(at));
  }

  /** Goes on while rows are plain; where the first other one begins, which may be the end. */
  private scanPlain(read: PlainReader, bytes: Uint8Array, from: number): number {
    let at = from;
    for (;;) {
      const next = read(bytes, at);
      if (next < 0) return at;
      this.line += 1;
      at = next;
    }
  }

  /** Where the next row begins, or -1 if this one may go on in the next chunk. */
  private scanRow(from: number, last: boolean): number {
    const { bytes, starts, ends, doubled } = this.row;
    const size = bytes.length;
    const delimiter = this.delimiter;
    this.quotedLines = 0;
    let count = 0;
    let at = from;
    let start = from;
    for (;;) {
      if (at < size && bytes[at] === QUOTE) {
        const close = this.closingQuote(at, last, count);
        if (close === -1) return -1;
        if (close === -2) return this.brokenLine(from, last);
        if (count < MAX_COLUMNS) {
          starts[count] = at + 1;
          ends[count] = close;
        }
        at = close + 1;
        if (at < size && bytes[at] === CR && at + 1 >= size && !last) return -1;
        if (at < size && bytes[at] === CR && (at + 1 >= size || bytes[at + 1] === LF)) at += 1;
        if (at >= size && !last) return -1;
        if (at < size && bytes[at] !== delimiter && bytes[at] !== LF) return this.brokenLine(from, last);
      } else {
        while (at < size && bytes[at] !== delimiter && bytes[at] !== LF) at += 1;
        if (at >= size && !last) return -1;
        if (count < MAX_COLUMNS) {
          starts[count] = start;
          ends[count] = at > start && bytes[at - 1] === CR && (at >= size || bytes[at] === LF) ? at - 1 : at;
          doubled[count] = 0;
        }
      }
      count += 1;
      if (at >= size || bytes[at] === LF) break;
      at += 1;
      start = at;
    }
    return this.emit(from, at, count);
  }

  private emit(from: number, end: number, count: number): number {
    const row = this.row;
    if (end - from > MAX_ROW_BYTES) this.refuseLongRow();
    const lines = this.quotedLines;
    if (lines > 0 && this.columns > 0 && count !== this.columns) return this.brokenLine(from, true);
    const isEmpty = count === 1 && row.ends[0] <= row.starts[0];
    if (!isEmpty) {
      if (this.columns === 0) {
        this.columns = count;
        this.readPlain = this.plain?.(count) ?? null;
      }
      row.count = count;
      row.line = this.line;
      row.rowStart = from;
      row.rowEnd = end;
      row.broken = false;
      this.onRow(row);
    }
    this.line += lines + 1;
    return end + 1;
  }

  /** Position of the closing mark; -1 if more bytes are needed, -2 if the mark is a stray one. */
  private closingQuote(open: number, last: boolean, field: number): number {
    const { bytes, doubled } = this.row;
    if (field < MAX_COLUMNS) doubled[field] = 0;
    const limit = Math.min(bytes.length, open + MAX_OPEN_QUOTE_BYTES);
    for (let i = open + 1; i < limit; i += 1) {
      const c = bytes[i];
      if (c === LF) this.quotedLines += 1;
      if (c !== QUOTE) continue;
      if (i + 1 >= bytes.length && !last) return -1;
      if (bytes[i + 1] !== QUOTE) return i;
      if (field < MAX_COLUMNS) doubled[field] = 1;
      i += 1;
    }
    return last || limit - open === MAX_OPEN_QUOTE_BYTES ? -2 : -1;
  }

  private brokenLine(from: number, last: boolean): number {
    const row = this.row;
    const found = row.bytes.indexOf(LF, from);
    if (found < 0 && !last) return -1;
    const end = found < 0 ? row.bytes.length : found;
    if (end - from > MAX_ROW_BYTES) this.refuseLongRow();
    row.count = 0;
    row.line = this.line;
    row.rowStart = from;
    row.rowEnd = end;
    row.broken = true;
    this.onRow(row);
    this.line += 1;
    return end + 1;
  }

  private refuseLongRow(): never {
    throw unusable(`Line ${this.line} is longer than 1 MiB. This does not look like a CSV file.`);
  }
}

function joined(a: Uint8Array, b: Uint8Array): Uint8Array {
  const both = new Uint8Array(a.length + b.length);
  both.set(a);
  both.set(b, a.length);
  return both;
}
