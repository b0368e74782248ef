import type { Readable } from "node:stream";

/** Byte streams by key. A key is a relative path of letters, digits, dots, dashes and slashes. */
export interface Storage {
  /** Streams to the end, then makes the object visible in one step; replaces an older one. Returns its bytes. */
  put(key: string, content: Readable | AsyncIterable<Uint8Array>): Promise<number>;
  /** The object, or its bytes `from` to `to` (exclusive). Throws an AppError `not_found` where there is no such object. */
  open(key: string, range?: ByteRange): Promise<Readable>;
  /** Bytes, or null where there is no such object. */
  size(key: string): Promise<number | null>;
  /** Removing what is not there is no error. */
  remove(key: string): Promise<void>;
  /** Removes every object whose key begins with the folder's. */
  removeFolder(folder: string): Promise<void>;
}

/** At least one byte. */
export interface ByteRange {
  from: number;
  to: number;
}

const KEY = /^[a-z0-9][a-z0-9._-]*(\/[a-z0-9][a-z0-9._-]*)*$/i;

/** Throws a RangeError for a key that could leave the store. */
export function checkKey(key: string): string {
  if (!KEY.test(key) || key.includes("..")) throw new RangeError(`Not a storage key: ${JSON.stringify(key)}.`);
  return key;
}
