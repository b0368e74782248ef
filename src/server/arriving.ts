import { createHash } from "node:crypto";
import { mkdirSync } from "node:fs";
import { join } from "node:path";
import type { Readable } from "node:stream";
import { FileStore } from "@tus/file-store";
import { MemoryLocker, Server } from "@tus/server";
import { AppError, notFound, type Problem } from "@/domain/errors";
import { env } from "@/env";
import { requirePermission, type Context } from "@/services/context";
import { STATUS_OF_CODE } from "./problem";

/** Files on their way in, in the pieces of the open tus protocol; what is whole goes on to the storage. */
const PATH = "/api/uploads/parts";
/** A file that nobody has gone on with for so long is given up. */
const KEEP_MS = 7 * 24 * 3_600_000;
const PART_ID = /^[0-9a-f]{32}$/;
/** A piece is held in memory while its checksum is compared. */
const MAX_PIECE_BYTES = 32 * 2 ** 20;
/** The protocol's own status for a piece that arrived damaged. */
const CHECKSUM_MISMATCH = 460;

const UNWRITTEN =
  "The server could not write this piece of the file: there may be no room left. What has arrived is kept for a week. Tell your administrator, then choose the file again to go on.";

const shared = globalThis as typeof globalThis & { tailmarkArriving?: { store: FileStore; locker: MemoryLocker } };

/** The library makes the folder in its own time: the first request would come too early. */
function openStore(): FileStore {
  const directory = join(env().DATA_DIR, "arriving");
  mkdirSync(directory, { recursive: true });
  return new FileStore({ directory, expirationPeriodInMilliseconds: KEEP_MS });
}

/** One for the process: its locks keep two requests from writing to one file. */
function arriving() {
  shared.tailmarkArriving ??= { store: openStore(), locker: new MemoryLocker() };
  return shared.tailmarkArriving;
}

/** Answers a request of the protocol; only who began a file may go on with it. */
export async function answerArriving(ctx: Context, request: Request, partId: string | null): Promise<Response> {
  requirePermission(ctx, "upload.create");
  if (partId !== null) await requireOwn(ctx, partId);
  const checked = request.method === "PATCH" ? await checkedPiece(request) : request;
  if (checked === null) return new Response(null, { status: CHECKSUM_MISMATCH, headers: { "tus-resumable": "1.0.0" } });
  const { store, locker } = arriving();
  const server = new Server({
    path: PATH,
    datastore: store,
    locker,
    relativeLocation: true,
    onResponseError: (_, error) => sayUnwritten(request, error),
    onUploadCreate: async (_, upload) => ({ metadata: { ...upload.metadata, owner: ownerOf(ctx) } }),
  });
  if (partId === null) await server.cleanUpExpiredUploads();
  return server.handleWeb(checked);
}

/** The library hides why a piece could not be written; a full disk is what it will be. */
function sayUnwritten(request: Request, error: Error | { status_code: number; body: string }) {
  if ("status_code" in error && error.status_code < 500) return undefined;
  if (!request.signal.aborted) console.error("A piece of a file could not be written:", error);
  const problem: Problem = { code: "full", message: UNWRITTEN };
  return { status_code: STATUS_OF_CODE.full, body: JSON.stringify(problem) };
}

/** A file that has arrived whole. */
export async function openArrived(ctx: Context, partId: string): Promise<Readable> {
  requirePermission(ctx, "upload.create");
  const { offset, size } = await requireOwn(ctx, partId);
  if (offset !== size) throw new AppError("conflict", "The file has not arrived whole yet.");
  return arriving().store.read(partId);
}

export async function removeArrived(partId: string): Promise<void> {
  await arriving().store.remove(partId);
}

function ownerOf(ctx: Context): string {
  return ctx.actor.type === "user" ? ctx.actor.userId : "";
}

async function requireOwn(ctx: Context, partId: string) {
  if (!PART_ID.test(partId)) throw notFound("Part", partId);
  const upload = await arriving()
    .store.getUpload(partId)
    .catch(() => null);
  if (!upload || upload.metadata?.owner !== ownerOf(ctx)) throw notFound("Part", partId);
  return upload;
}

/** The request as it is where it names no checksum; null where the piece is not what was sent. */
async function checkedPiece(request: Request): Promise<Request | null> {
  const [algorithm, expected] = (request.headers.get("upload-checksum") ?? "").split(" ");
  if (!expected || !request.body) return request;
  if (algorithm !== "sha256") throw new AppError("invalid", "The checksum of a piece is sha256 and nothing else.");
  const pieces: Uint8Array[] = [];
  let bytes = 0;
  const hash = createHash("sha256");
  for await (const chunk of request.body as unknown as AsyncIterable<Uint8Array>) {
    bytes += chunk.length;
    if (bytes > MAX_PIECE_BYTES) throw new AppError("invalid", "A piece with a checksum has at most 32 MiB.");
    hash.update(chunk);
    pieces.push(chunk);
  }
  if (hash.digest("base64") !== expected) return null;
  return new Request(request.url, { method: request.method, headers: request.headers, body: Buffer.concat(pieces) });
}
