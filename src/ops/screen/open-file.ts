import { createReadStream } from "node:fs";
import { access, constants, stat } from "node:fs/promises";
import { dirname } from "node:path";
import { AppError } from "@/domain/errors";
import type { FileMapping, UploadKind } from "@/domain/upload";
import { detect, DETECT_BYTES } from "@/formats/detect/detect";
import { peek } from "@/formats/peek";

export interface OpenedFile {
  chunks: AsyncIterable<Uint8Array>;
  mapping: FileMapping;
  remarks: string[];
}

const REASONS: Record<string, string> = {
  ENOENT: "does not exist",
  EACCES: "may not be read",
  EISDIR: "is a folder",
};

/** Opens a file and finds out how to read it. */
export async function openFile(path: string, kind: UploadKind): Promise<OpenedFile> {
  const { head, all } = await peek(createReadStream(path, { highWaterMark: 262_144 }), DETECT_BYTES);
  const { mapping, remarks } = detect(head, path, kind);
  return { chunks: all, mapping, remarks };
}

/** Runs `work` on a file and puts the file's name before whatever goes wrong with it. */
export async function withFile<T>(path: string, work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    if (error instanceof AppError) throw new AppError(error.code, `${path}: ${error.message}`, { cause: error });
    const code = error instanceof Error && "code" in error ? String(error.code) : "";
    if (code === "") throw error;
    throw new AppError("invalid", `${path} ${REASONS[code] ?? `cannot be read (${code})`}.`, { cause: error });
  }
}

/** Says before the work begins that its result could not be written. */
export async function requireWritable(path: string): Promise<void> {
  const folder = dirname(path);
  try {
    const isFolder = await stat(path).then((found) => found.isDirectory(), () => false);
    if (isFolder) throw new AppError("invalid", `${path} is a folder: give --out a file.`);
    await access(folder, constants.W_OK);
  } catch (error) {
    if (error instanceof AppError) throw error;
    throw new AppError("invalid", `${path} cannot be written: the folder ${folder} does not exist or is closed.`, { cause: error });
  }
}
