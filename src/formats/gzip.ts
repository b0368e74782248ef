import { Readable } from "node:stream";
import { constants, createGunzip, gunzipSync } from "node:zlib";
import { unusable } from "./unusable";

export interface GunzipLimits {
  /** Below this many unpacked bytes any ratio is let through. */
  graceBytes: number;
  /** Unpacked to packed bytes. Ping files reach 5 to 15; a bomb of zeros reaches 1,030. */
  maxRatio: number;
}

const LIMITS: GunzipLimits = { graceBytes: 64 * 2 ** 20, maxRatio: 200 };
const BOMB = "The gzip data unpack to far more than a data file would. The file was refused.";

export function isGzip(bytes: Uint8Array): boolean {
  return bytes.length >= 2 && bytes[0] === 0x1f && bytes[1] === 0x8b;
}

/** The bytes as they are, or unpacked where they begin like gzip. Chunks may be cut anywhere. */
export async function* plainChunks(
  chunks: AsyncIterable<Uint8Array>,
  limits: GunzipLimits = LIMITS,
): AsyncGenerator<Uint8Array> {
  const source = chunks[Symbol.asyncIterator]();
  let head: Uint8Array = new Uint8Array(0);
  while (head.length < 2) {
    const next = await source.next();
    if (next.done) break;
    head = head.length === 0 ? next.value : Buffer.concat([head, next.value]);
  }
  const all = rejoin(head, source);
  yield* isGzip(head) ? unpacked(all, limits) : all;
}

async function* rejoin(head: Uint8Array, rest: AsyncIterator<Uint8Array>): AsyncGenerator<Uint8Array> {
  try {
    if (head.length > 0) yield head;
    for (let next = await rest.next(); !next.done; next = await rest.next()) yield next.value;
  } finally {
    await rest.return?.();
  }
}

async function* unpacked(chunks: AsyncIterable<Uint8Array>, limits: GunzipLimits): AsyncGenerator<Uint8Array> {
  const gunzip = createGunzip({ chunkSize: 256 * 1024 });
  let packedBytes = 0;
  let plainBytes = 0;
  const counted = async function* () {
    for await (const chunk of chunks) {
      packedBytes += chunk.length;
      yield chunk;
    }
  };
  const source = Readable.from(counted(), { objectMode: false });
  source.on("error", (error) => gunzip.destroy(error));
  source.pipe(gunzip);
  try {
    for await (const chunk of gunzip) {
      const bytes = chunk as Uint8Array;
      plainBytes += bytes.length;
      if (plainBytes > limits.graceBytes && plainBytes > packedBytes * limits.maxRatio) throw unusable(BOMB);
      yield bytes;
    }
  } catch (error) {
    throw gzipProblem(error);
  } finally {
    source.destroy();
    gunzip.destroy();
  }
}

/** 64 KiB of gzip unpack to 66 MiB at most. */
const MAX_PACKED_HEAD = 65_536;

export interface PlainStart {
  bytes: Uint8Array;
  /** Nothing was cut off, if the packed bytes are the whole file. */
  isWhole: boolean;
}

/** The beginning of a file, unpacked as far as the given bytes reach, at most `maxBytes`. It may stop in the middle of a row. */
export function plainStart(bytes: Uint8Array, maxBytes: number): PlainStart {
  if (!isGzip(bytes)) return { bytes: bytes.subarray(0, maxBytes), isWhole: bytes.length < maxBytes };
  try {
    const plain = gunzipSync(bytes.subarray(0, MAX_PACKED_HEAD), { finishFlush: constants.Z_SYNC_FLUSH });
    return { bytes: plain.subarray(0, maxBytes), isWhole: bytes.length <= MAX_PACKED_HEAD && plain.length < maxBytes };
  } catch (error) {
    throw gzipProblem(error);
  }
}

function gzipProblem(error: unknown): unknown {
  const code = error instanceof Error && "code" in error ? String(error.code) : "";
  if (code === "Z_BUF_ERROR") return unusable("The gzip data end too early: the file is cut off. Send it again.", error);
  if (code.startsWith("Z_")) return unusable("The gzip data are damaged and cannot be unpacked. Send the file again.", error);
  return error;
}
