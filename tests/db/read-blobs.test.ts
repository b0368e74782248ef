import { describe, expect, it } from "vitest";
import { parseBlobs, type Blob } from "@/db/read-blobs";

/** What PostgreSQL sends for `copy (select key, bytes ...) to stdout (format binary)`. */
function copyOf(rows: { key: number; bytes: Uint8Array }[]): Buffer {
  const header = Buffer.concat([Buffer.from("PGCOPY\n\xff\r\n\0", "latin1"), Buffer.alloc(8)]);
  const tuples = rows.map(({ key, bytes }) => {
    const head = Buffer.alloc(14);
    head.writeInt16BE(2, 0);
    head.writeInt32BE(4, 2);
    head.writeInt32BE(key, 6);
    head.writeInt32BE(bytes.length, 10);
    return Buffer.concat([head, bytes]);
  });
  return Buffer.concat([header, ...tuples, Buffer.from([0xff, 0xff])]);
}

async function read(copy: Buffer, pieces: number): Promise<Blob[]> {
  async function* chunks() {
    for (let at = 0; at < copy.length; at += pieces) yield copy.subarray(at, at + pieces);
  }
  const blobs: Blob[] = [];
  for await (const blob of parseBlobs(chunks())) blobs.push(blob);
  return blobs;
}

describe("bytes read by COPY", () => {
  const rows = [
    { key: 7, bytes: Uint8Array.from({ length: 100 }, (_, i) => i) },
    { key: 2_000_000_001, bytes: Uint8Array.of(255) },
    { key: 8, bytes: new Uint8Array(33) },
  ];

  it.each([1, 2, 13, 14, 19, 64, 10_000])("come back whole, each in a buffer of its own, however they are cut: %d bytes at a time", async (pieces) => {
    const blobs = await read(copyOf(rows), pieces);
    expect(blobs).toEqual(rows);
    expect(blobs.every(({ bytes }) => bytes.buffer.byteLength === bytes.length)).toBe(true);
  });

  it("may be none", async () => expect(await read(copyOf([]), 5)).toEqual([]));
});
