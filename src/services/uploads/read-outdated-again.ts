import { and, asc, eq, exists, ne } from "drizzle-orm";
import { METHOD_VERSION } from "@/core/method-version";
import { screenDays, uploads } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { ingestUpload } from "@/jobs/definitions/ingest-upload";
import { recordAudit } from "../audit/record-audit";
import type { Context } from "../context";

/**
 * Queues the files that another method has read, in the order in which they came: figures of two methods are never
 * mixed, so that their days count nowhere until the present one has read them. Says how many; run twice, queues once.
 */
export async function readOutdatedAgain(ctx: Pick<Context, "actor" | "db" | "now" | "queue">): Promise<number> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Files are read again by the system only.");
  return ctx.db.transaction(async (tx) => {
    const outdated = tx
      .select({ id: screenDays.id })
      .from(screenDays)
      .where(and(eq(screenDays.uploadId, uploads.id), ne(screenDays.methodVersion, METHOD_VERSION)));
    const files = await tx
      .select({ id: uploads.id, fileName: uploads.fileName })
      .from(uploads)
      .where(and(eq(uploads.kind, "pings"), eq(uploads.state, "done"), exists(outdated)))
      .orderBy(asc(uploads.createdAt), asc(uploads.receivedNo))
      .for("update");
    for (const { id, fileName } of files) {
      await tx.update(uploads).set({ state: "waiting", progress: null, finishedAt: null }).where(eq(uploads.id, id));
      await ctx.queue.enqueue(ingestUpload, { uploadId: id }, { db: tx });
      await recordAudit(tx, ctx, { action: "queued file again", subject: fileName, detail: { uploadId: id, method: METHOD_VERSION } });
    }
    return files.length;
  });
}
