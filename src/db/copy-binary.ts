import { pipeline } from "node:stream/promises";
import { Readable } from "node:stream";
import type { PoolClient } from "pg";
import { from as copyFrom } from "pg-copy-streams";

const POSTGRES_EPOCH_DAY = 10_957;
const POSTGRES_EPOCH_MS = 946_684_800_000;
const CHUNK_BYTES = 1 << 20;
// "PGCOPY\n", 0xff, "\r\n", 0, then flags and extension length (PostgreSQL documentation, COPY, binary format).
const SIGNATURE = Buffer.from([80, 71, 67, 79, 80, 89, 10, 255, 13, 10, 0, 0, 0, 0, 0, 0, 0, 0, 0]);

/** After the last row: a count of columns of -1. */
const TRAILER = Buffer.from([255, 255]);

/** Writes rows in PostgreSQL's binary COPY format; `take` hands over what is ready. */
export class CopyWriter {
  private buffer = Buffer.allocUnsafe(CHUNK_BYTES * 2);
  private at = 0;

  row(columns: number): void {
    this.room(2);
    this.at = this.buffer.writeInt16BE(columns, this.at);
  }
  int2(value: number): void {
    this.size(2);
    this.at = this.buffer.writeInt16BE(value, this.at);
  }
  int4(value: number): void {
    this.size(4);
    this.at = this.buffer.writeInt32BE(value, this.at);
  }
  int8(value: bigint): void {
    this.size(8);
    this.at = this.buffer.writeBigInt64BE(value, this.at);
  }
  /** NaN is written as null. */
  float4(value: number): void {
    if (Number.isNaN(value)) return this.nothing();
    this.size(4);
    this.at = this.buffer.writeFloatBE(value, this.at);
  }
  /** Days since 1970-01-01. */
  date(day: number): void {
    this.int4(day - POSTGRES_EPOCH_DAY);
  }
  instant(ms: number): void {
    const microseconds = Math.round((ms - POSTGRES_EPOCH_MS) * 1000);
    this.size(8);
    this.at = this.buffer.writeInt32BE(Math.floor(microseconds / 2 ** 32), this.at);
    this.at = this.buffer.writeUInt32BE(microseconds - Math.floor(microseconds / 2 ** 32) * 2 ** 32, this.at);
  }
  bytes(value: Uint8Array): void {
    this.size(value.length);
    this.buffer.set(value, this.at);
    this.at += value.length;
  }
  nothing(): void {
    this.room(4);
    this.at = this.buffer.writeInt32BE(-1, this.at);
  }

  get isFull(): boolean {
    return this.at >= CHUNK_BYTES;
  }
  take(): Buffer {
    const ready = Buffer.from(this.buffer.subarray(0, this.at));
    this.at = 0;
    return ready;
  }

  private size(bytes: number): void {
    this.room(4 + bytes);
    this.at = this.buffer.writeInt32BE(bytes, this.at);
  }
  private room(bytes: number): void {
    if (this.at + bytes <= this.buffer.length) return;
    const larger = Buffer.allocUnsafe(Math.max(this.buffer.length * 2, this.at + bytes));
    this.buffer.copy(larger, 0, 0, this.at);
    this.buffer = larger;
  }
}

/** Rows without what stands before the first and after the last of them; `writeRow` writes the row of each index from 0 to `rows`. */
export function* encodeRows(rows: number, writeRow: (writer: CopyWriter, index: number) => void): Generator<Buffer> {
  const writer = new CopyWriter();
  for (let i = 0; i < rows; i++) {
    writeRow(writer, i);
    if (writer.isFull) yield writer.take();
  }
  yield writer.take();
}

/** Runs a binary COPY of rows that `encodeRows` made, wherever they were kept meanwhile. */
export async function copyRows(client: PoolClient, target: string, rows: AsyncIterable<Uint8Array> | Iterable<Uint8Array>): Promise<void> {
  async function* whole(): AsyncGenerator<Uint8Array> {
    yield SIGNATURE;
    yield* rows;
    yield TRAILER;
  }
  await pipeline(Readable.from(whole(), { objectMode: true, highWaterMark: 2 }), client.query(copyFrom(`copy ${target} from stdin (format binary)`)));
}
