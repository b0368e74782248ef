import type { Pool } from "pg";
import { to as copyTo } from "pg-copy-streams";

/** Signature, flags and length of the extension area, which is empty: documented with COPY under "Binary Format". */
const HEADER_BYTES = 19;
/** Number of fields, length and value of the key, length of the bytes. */
const ROW_HEAD_BYTES = 14;

export interface Blob {
  key: number;
  /** Until the next one is asked for: then others take their place. They begin where their buffer does. */
  bytes: Uint8Array<ArrayBuffer>;
}

/**
 * Rows of (integer, bytea) of a query, by COPY in binary: some four times as fast as rows of a select, and months of
 * them pass through one buffer. The query must hold no input of people.
 */
export async function* readBlobs(pool: Pool, query: string): AsyncGenerator<Blob> {
  const client = await pool.connect();
  let isWhole = false;
  try {
    yield* parseBlobs(client.query(copyTo(`copy (${query}) to stdout (format binary)`)));
    isWhole = true;
  } finally {
    // A connection in the middle of a copy is of no use to anybody.
    client.release(!isWhole);
  }
}

/** The same from the bytes of the copy, cut anywhere. */
export async function* parseBlobs(chunks: AsyncIterable<Uint8Array> | Iterable<Uint8Array>): AsyncGenerator<Blob> {
  let key: number | null = null;
  let isHeader = true;
  let room = new Uint8Array(HEADER_BYTES);
  let part = room;
  let filled = 0;
  const expect = (bytes: number): void => {
    if (room.length < bytes) room = new Uint8Array(bytes);
    part = room.subarray(0, bytes);
    filled = 0;
  };
  for await (const chunk of chunks) {
    for (let at = 0; at < chunk.length; ) {
      const taken = Math.min(part.length - filled, chunk.length - at);
      part.set(chunk.subarray(at, at + taken), filled);
      at += taken;
      filled += taken;
      if (filled < part.length) continue;
      if (isHeader || key !== null) {
        if (key !== null) yield { key, bytes: part };
        [key, isHeader] = [null, false];
        expect(ROW_HEAD_BYTES);
      } else {
        const head = new DataView(part.buffer, 0, ROW_HEAD_BYTES);
        key = head.getInt32(6);
        expect(head.getInt32(10));
      }
    }
  }
}
