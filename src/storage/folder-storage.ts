import { randomUUID } from "node:crypto";
import { createWriteStream } from "node:fs";
import { mkdir, open, readdir, rename, rm, stat } from "node:fs/promises";
import { dirname, join } from "node:path";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { notFound } from "@/domain/errors";
import { checkKey, type Storage } from "./storage";

const RANGE_CHUNK_BYTES = 2 ** 20;
const PARTIAL = ".part";
/** An object that arrives for longer than this does not arrive any more. */
const PARTIAL_MAX_MS = 24 * 3_600_000;
/** No reading of a file takes so long without a new piece. */
const PIECES_MAX_MS = 24 * 3_600_000;

/** Keeps each object as a file below `root`. */
export function openFolderStorage(root: string): Storage {
  const pathOf = (key: string) => join(root, checkKey(key));

  return {
    async put(key, content) {
      const path = pathOf(key);
      // A reader never sees half an object: the bytes arrive under another name.
      const partial = `${path}.${randomUUID()}${PARTIAL}`;
      await mkdir(dirname(path), { recursive: true });
      try {
        const sink = createWriteStream(partial);
        await pipeline(content instanceof Readable ? content : Readable.from(content), sink);
        await rename(partial, path);
        return sink.bytesWritten;
      } catch (error) {
        await rm(partial, { force: true });
        throw error;
      }
    },

    async open(key, range) {
      try {
        const file = await open(pathOf(key));
        return file.createReadStream(range && { start: range.from, end: range.to - 1, highWaterMark: RANGE_CHUNK_BYTES });
      } catch (error) {
        if (isMissing(error)) throw notFound("Stored file", key);
        throw error;
      }
    },

    async size(key) {
      try {
        return (await stat(pathOf(key))).size;
      } catch (error) {
        if (isMissing(error)) return null;
        throw error;
      }
    },

    async remove(key) {
      await rm(pathOf(key), { force: true });
    },

    async removeFolder(folder) {
      await rm(pathOf(folder), { recursive: true, force: true });
    },
  };
}

/** Removes what is left of objects that arrived when a process was killed. */
export async function removeOldPartials(root: string, now: Date): Promise<void> {
  const names = await readdir(root, { recursive: true }).catch((error: unknown) => {
    if (isMissing(error)) return [];
    throw error;
  });
  for (const name of names) {
    if (!name.endsWith(PARTIAL)) continue;
    const found = await stat(join(root, name)).catch(() => null);
    if (found && now.getTime() - found.mtimeMs > PARTIAL_MAX_MS) await rm(join(root, name), { force: true });
  }
}

/** Pieces of work that were given up while somebody was still at them. */
export async function removeOldPieces(root: string, now: Date): Promise<void> {
  const folder = join(root, "pieces");
  const runs = await readdir(folder).catch((error: unknown) => {
    if (isMissing(error)) return [];
    throw error;
  });
  for (const run of runs) {
    // A folder's time is that of the last object that was put into it.
    const found = await stat(join(folder, run)).catch(() => null);
    if (found && now.getTime() - found.mtimeMs > PIECES_MAX_MS) await rm(join(folder, run), { recursive: true, force: true });
  }
}

function isMissing(error: unknown): boolean {
  return error instanceof Error && "code" in error && error.code === "ENOENT";
}
