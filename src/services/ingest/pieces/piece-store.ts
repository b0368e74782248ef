import { Readable } from "node:stream";
import { AppError } from "@/domain/errors";
import type { ByteRange, Storage } from "@/storage/storage";

/** Objects that the pieces of one run of work hand to each other. */
export interface PieceStore {
  /** Differs from that of every other store: what a process remembers of an object goes by it. */
  readonly id: string;
  put(name: string, chunks: Iterable<Uint8Array> | AsyncIterable<Uint8Array>): Promise<void>;
  /** The object, or some of its bytes. */
  read(name: string, range?: ByteRange): Promise<Uint8Array>;
  stream(name: string): AsyncIterable<Uint8Array>;
  /** Removes all. */
  clear(): Promise<void>;
}

/** For work that is small, and done by one process. */
export function memoryPieces(id: string): PieceStore {
  const objects = new Map<string, Uint8Array>();
  const objectOf = (name: string): Uint8Array => objects.get(name) ?? missing(name);
  return {
    id,
    async put(name, chunks) {
      const all: Uint8Array[] = [];
      for await (const chunk of chunks) all.push(chunk);
      objects.set(name, plain(all));
    },
    async read(name, range) {
      const bytes = objectOf(name);
      return range ? bytes.subarray(range.from, range.to) : bytes;
    },
    async *stream(name) {
      yield objectOf(name);
    },
    async clear() {
      objects.clear();
    },
  };
}

/** In the storage that all workers share. */
export function storedPieces(storage: Storage, run: string): PieceStore {
  const folder = `pieces/${run}`;
  async function open(name: string, range?: ByteRange): Promise<Readable> {
    try {
      return await storage.open(`${folder}/${name}`, range);
    } catch (error) {
      // Not a fault of the file that is read in: another try may succeed.
      if (error instanceof AppError && error.code === "not_found") return missing(name, error);
      throw error;
    }
  }
  return {
    id: run,
    async put(name, chunks) {
      await storage.put(`${folder}/${name}`, Readable.from(chunks));
    },
    async read(name, range) {
      if (range && range.to <= range.from) return new Uint8Array(0);
      const chunks: Uint8Array[] = [];
      for await (const chunk of await open(name, range)) chunks.push(chunk as Uint8Array);
      return plain(chunks);
    },
    async *stream(name) {
      for await (const chunk of await open(name)) yield chunk as Uint8Array;
    },
    clear: () => storage.removeFolder(folder),
  };
}

/** As a plain array: slices of a Buffer are no copies. */
function plain(chunks: readonly Uint8Array[]): Uint8Array {
  const { buffer, byteOffset, length } = chunks.length === 1 ? chunks[0] : Buffer.concat(chunks);
  return new Uint8Array(buffer, byteOffset, length);
}

function missing(name: string, cause?: unknown): never {
  throw new Error(`The piece ${name} of this run is gone.`, { cause });
}
