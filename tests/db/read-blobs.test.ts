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
  for await (const { key, bytes } of parseBlobs(chunks())) blobs.push({ key, bytes: bytes.slice() });
  return blobs;
}

describe("bytes read by COPY", () => {
  const rows = [
    { key: 7, bytes: Uint8Array.from({ length: 100 }, (_, i) => i) },
    { key: 2_000_000_001, bytes: Uint8Array.of(255) },
    { key: 8, bytes: new Uint8Array(33) },
  ];

  it.each([1, 2, 13, 14, 19, 64, 10_000])("come back whole, however they are cut: %d bytes at a time", async (pieces) => {
    expect(await read(copyOf(rows), pieces)).toEqual(rows);
  });

  it("pass through one buffer, from its beginning", async () => {
    const buffers = new Set<ArrayBufferLike>();
    const longestFirst = [...rows].sort((a, b) => b.bytes.length - a.bytes.length);
    for await (const { bytes } of parseBlobs([copyOf(longestFirst)])) {
      expect(bytes.byteOffset).toBe(0);
      buffers.add(bytes.buffer);
    }
    expect(buffers.size).toBe(1);
  });

  it("may be none", async () => expect(await read(copyOf([]), 5)).toEqual([]));
});
