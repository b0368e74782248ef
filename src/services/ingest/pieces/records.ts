import { deserialize, serialize } from "node:v8";

/** Bytes of a value: typed arrays, maps, sets and NaN come back as they were. Views into other buffers are copied. */
export function encodeRecord(value: unknown): Uint8Array {
  return serialize(value);
}

export function decodeRecord<T>(bytes: Uint8Array): T {
  return deserialize(bytes) as T;
}

const LENGTH_BYTES = 4;

/** A record behind its length, so that several may stand one after the other. */
export function lengthAndRecord(value: unknown): Uint8Array {
  const record = serialize(value);
  const length = Buffer.alloc(LENGTH_BYTES);
  length.writeUInt32LE(record.length);
  return Buffer.concat([length, record]);
}

/** The records of bytes in which they stand one after the other. */
export function recordsIn<T>(bytes: Uint8Array): T[] {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const records: T[] = [];
  for (let at = 0; at < bytes.length; ) {
    const from = at + LENGTH_BYTES;
    at = from + view.getUint32(at, true);
    records.push(decodeRecord<T>(bytes.subarray(from, at)));
  }
  return records;
}

/** Where each section begins and the last one ends, in bytes. */
export function offsetsOf(sections: readonly Uint8Array[]): number[] {
  const offsets = [0];
  for (const section of sections) offsets.push(offsets[offsets.length - 1] + section.length);
  return offsets;
}
