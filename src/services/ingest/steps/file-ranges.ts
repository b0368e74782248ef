import type { ByteRange, Storage } from "@/storage/storage";

const LF = 10;
const CR = 13;
const QUOTE = 34;
/** A row longer than this is no row of a data file; readers refuse it. */
const MAX_ROW_BYTES = 2 ** 20;
const TAIL_BYTES = 65_536;
const GZIP = [0x1f, 0x8b];
const BYTE_ORDER_MARK = [0xef, 0xbb, 0xbf];

export interface FileRanges {
  /** Rows that begin in one of these are its own. */
  ranges: ByteRange[];
  /** The file's first row with its line end: what each range is read behind. */
  head: Uint8Array;
}

/**
 * Cuts a file of delimited rows into ranges that may be read apart; null where it must be read from its beginning to its
 * end: packed, short, or with a first row that is not whole at its line end.
 */
export async function rangesOf(storage: Storage, key: string, bytes: number, rangeBytes: number): Promise<FileRanges | null> {
  if (bytes < 2 * rangeBytes) return null;
  const start = await bytesOf(storage, key, { from: 0, to: Math.min(bytes, MAX_ROW_BYTES) });
  const head = firstRow(start);
  if (startsWith(start, GZIP) || head === null || head.filter((byte) => byte === QUOTE).length % 2 === 1) return null;
  const count = Math.floor(bytes / rangeBytes);
  const edge = (i: number) => Math.round((i * bytes) / count);
  return { head, ranges: Array.from({ length: count }, (_, i) => ({ from: edge(i), to: edge(i + 1) })) };
}

function firstRow(start: Uint8Array): Uint8Array | null {
  let from = startsWith(start, BYTE_ORDER_MARK) ? BYTE_ORDER_MARK.length : 0;
  for (let end = start.indexOf(LF, from); end >= 0; end = start.indexOf(LF, from)) {
    const isEmpty = end === from || (end === from + 1 && start[from] === CR);
    if (!isEmpty) return start.slice(from, end + 1);
    from = end + 1;
  }
  return null;
}

function startsWith(bytes: Uint8Array, mark: readonly number[]): boolean {
  return mark.every((byte, i) => bytes[i] === byte);
}

export interface RangeOfFile {
  storageKey: string;
  /** Of the file. */
  bytes: number;
  range: ByteRange;
  head: Uint8Array;
}

/** The rows that begin in a range, behind the file's first row where they are not the file's beginning. `onQuote` is called where there is a quotation mark in them. */
export async function* rowsOfRange(storage: Storage, { storageKey: key, bytes, range: { from, to }, head }: RangeOfFile, onQuote: () => void): AsyncGenerator<Uint8Array> {
  let isInside = from === 0;
  let last = LF;
  if (!isInside) yield head;
  for await (const chunk of (await storage.open(key, { from: Math.max(0, from - 1), to })) as AsyncIterable<Uint8Array>) {
    if (chunk.includes(QUOTE)) onQuote();
    const begin = isInside ? 0 : chunk.indexOf(LF) + 1;
    if (!isInside && begin === 0) continue;
    isInside = true;
    last = chunk[chunk.length - 1];
    yield chunk.subarray(begin);
  }
  if (!isInside || last === LF) return;
  for (let at = to; at < bytes; at += TAIL_BYTES) {
    const tail = await bytesOf(storage, key, { from: at, to: Math.min(bytes, at + TAIL_BYTES) });
    if (tail.includes(QUOTE)) onQuote();
    const end = tail.indexOf(LF) + 1;
    yield end > 0 ? tail.subarray(0, end) : tail;
    if (end > 0) return;
  }
}

async function bytesOf(storage: Storage, key: string, range: ByteRange): Promise<Uint8Array> {
  const chunks: Uint8Array[] = [];
  for await (const chunk of await storage.open(key, range)) chunks.push(chunk as Uint8Array);
  return Buffer.concat(chunks);
}
