import { and, eq } from "drizzle-orm";
import { withAdvisoryLock } from "@/db/bulk-transaction";
import { uploads } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { FileMapping, UploadKind } from "@/domain/upload";
import type { Context } from "../context";
import { batchesToRead, settleHour, writeHour, type FeedHour } from "../feed/gather-hour";
import { orNoRoom } from "../no-room";
import { failUpload } from "./finish-upload";
import { ingestJunctions } from "./ingest-junctions";
import { ingestLegs } from "./ingest-legs";
import { ingestPings } from "./ingest-pings";

const OUR_FAULT = "Reading the file failed on our side; nothing of it was kept. Start it again, and tell your administrator if it fails again.";

/** Two jobs of one hour would both replace what the other one read in. */
const FEED_LOCK = 7_401_161;

export interface IngestRun {
  /** A failure of this run is final. */
  isLast: boolean;
  signal: AbortSignal;
}

/**
 * Reads one upload in. Safe to run twice: the result is swapped in by one transaction, and a file that is in already
 * is left alone. A file that cannot be used is a finished job with a sentence for the person, not an error.
 */
export async function ingestUpload(ctx: Context, input: { uploadId: string }, run?: IngestRun): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Files are read in by the worker only.");
  const [upload] = await ctx.db
    .select({
      id: uploads.id,
      kind: uploads.kind,
      state: uploads.state,
      storageKey: uploads.storageKey,
      mapping: uploads.mapping,
      supplierId: uploads.supplierId,
      feedHour: uploads.feedHour,
    })
    .from(uploads)
    .where(eq(uploads.id, input.uploadId));
  if (!upload || upload.state === "received") return;
  const { mapping, supplierId, feedHour } = upload;
  if (!mapping) throw new TypeError(`Upload ${upload.id} was started without a mapping.`);
  const ready = { ...upload, mapping };
  if (feedHour !== null && supplierId !== null) {
    return readInHour(ctx, { ...ready, supplierId: null }, { uploadId: upload.id, storageKey: upload.storageKey, supplierId, feedHour }, run);
  }
  if (upload.state !== "done") await readIn(ctx, ready, run);
}

/** An hour of a feed is read in again, in the place of what it was, as often as batches have come. */
async function readInHour(ctx: Context, upload: ReadyUpload, hour: FeedHour, run?: IngestRun): Promise<void> {
  await withAdvisoryLock(ctx.db, FEED_LOCK, async () => {
    const batches = await batchesToRead(ctx, hour);
    if (batches === null) return;
    await readIn(ctx, upload, run, () => writeHour(ctx, hour, batches));
    const [now] = await ctx.db.select({ state: uploads.state }).from(uploads).where(eq(uploads.id, upload.id));
    if (now?.state === "done") await settleHour(ctx, hour, batches);
  });
}

interface ReadyUpload {
  id: string;
  kind: UploadKind;
  storageKey: string;
  mapping: FileMapping;
  supplierId: number | null;
}

async function readIn(ctx: Context, upload: ReadyUpload, run?: IngestRun, prepare?: () => Promise<void>): Promise<void> {
  await ctx.db.update(uploads).set({ state: "reading", failure: null }).where(eq(uploads.id, upload.id));
  try {
    await prepare?.();
    await ingestKind(ctx, upload, run?.signal);
  } catch (thrown) {
    const error = orNoRoom(thrown);
    if (error instanceof AppError) return await failUpload(ctx, upload.id, error.message, null, null);
    if (run?.isLast && !run.signal.aborted) {
      await failUpload(ctx, upload.id, OUR_FAULT, null, null);
    }
    if (run?.signal.aborted) await waitAgain(ctx, upload.id);
    throw error;
  }
}

async function ingestKind(ctx: Context, upload: ReadyUpload, signal?: AbortSignal): Promise<void> {
  const { kind } = upload;
  switch (kind) {
    case "junctions":
      return ingestJunctions(ctx, upload);
    case "legs":
      return ingestLegs(ctx, upload);
    case "pings":
      return ingestPings(ctx, upload, signal);
    default:
      return kind satisfies never;
  }
}

/** The worker was told to stop in the middle: the file waits for the next one. */
async function waitAgain(ctx: Context, uploadId: string): Promise<void> {
  await ctx.db.update(uploads).set({ state: "waiting", progress: null }).where(and(eq(uploads.id, uploadId), eq(uploads.state, "reading")));
}

/** No worker is left that would try: each died over the file. */
export async function giveUpUpload(ctx: Context, input: { uploadId: string }): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Files are given up by the worker only.");
  const [upload] = await ctx.db.select({ state: uploads.state }).from(uploads).where(eq(uploads.id, input.uploadId));
  if (upload?.state === "waiting" || upload?.state === "reading") await failUpload(ctx, input.uploadId, OUR_FAULT, null, null);
}
