import { randomUUID } from "node:crypto";
import { createWriteStream } from "node:fs";
import { mkdir, open, rename, rm, stat } from "node:fs/promises";
import { dirname, join } from "node:path";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { notFound } from "@/domain/errors";
import { checkKey, type Storage } from "./storage";

/** Keeps each object as a file below `root`. */
export function openFolderStorage(root: string): Storage {
  const pathOf = (key: string) => join(root, checkKey(key));

  return {
    async put(key, content) {
      const path = pathOf(key);
      // A reader never sees half an object: the bytes arrive under another name.
      const partial = `${path}.${randomUUID()}.part`;
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

    async open(key) {
      try {
        const file = await open(pathOf(key));
        return file.createReadStream();
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
  };
}

function isMissing(error: unknown): boolean {
  return error instanceof Error && "code" in error && error.code === "ENOENT";
}
