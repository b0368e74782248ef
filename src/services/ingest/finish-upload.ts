import { eq } from "drizzle-orm";
import { uploads } from "@/db/schema";
import type { IngestReport } from "@/domain/upload";
import { sendUploadMail } from "@/jobs/definitions/send-upload-mail";
import type { Context } from "../context";

/** In the transaction that swaps the result in: the file is in, or nothing has changed. */
export async function finishUpload(ctx: Context, uploadId: string, report: IngestReport, rejectsKey: string | null): Promise<void> {
  await ctx.db
    .update(uploads)
    .set({ state: "done", report, rejectsKey, progress: null, failure: null, finishedAt: new Date() })
    .where(eq(uploads.id, uploadId));
  await ctx.queue.enqueue(sendUploadMail, { uploadId }, { db: ctx.db });
}

/** Nothing of the file is in; the sentence says why. */
export async function failUpload(ctx: Context, uploadId: string, failure: string, report: IngestReport | null, rejectsKey: string | null): Promise<void> {
  await ctx.db.transaction(async (tx) => {
    await tx
      .update(uploads)
      .set({ state: "failed", failure, report, rejectsKey, progress: null, finishedAt: new Date() })
      .where(eq(uploads.id, uploadId));
    await ctx.queue.enqueue(sendUploadMail, { uploadId }, { db: tx });
  });
}
