import { eq } from "drizzle-orm";
import { uploads } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { FileMapping } from "@/domain/upload";
import type { Context } from "../context";
import { failUpload } from "./finish-upload";
import { ingestJunctions } from "./ingest-junctions";
import { ingestPings } from "./ingest-pings";

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
    .select({ id: uploads.id, kind: uploads.kind, state: uploads.state, storageKey: uploads.storageKey, mapping: uploads.mapping })
    .from(uploads)
    .where(eq(uploads.id, input.uploadId));
  if (!upload || upload.state === "done" || upload.state === "received") return;
  if (!upload.mapping) throw new TypeError(`Upload ${upload.id} was started without a mapping.`);
  await ctx.db.update(uploads).set({ state: "reading", failure: null }).where(eq(uploads.id, upload.id));
  const ready = { id: upload.id, storageKey: upload.storageKey, mapping: upload.mapping satisfies FileMapping };
  try {
    if (upload.kind === "junctions") await ingestJunctions(ctx, ready);
    else await ingestPings(ctx, ready, run?.signal);
  } catch (error) {
    if (error instanceof AppError) return failUpload(ctx, upload.id, error.message, null, null);
    if (run?.isLast && !run.signal.aborted) {
      await failUpload(ctx, upload.id, "Reading the file failed on our side; nothing of it was kept. Start it again, and tell your administrator if it fails again.", null, null);
    }
    throw error;
  }
}
