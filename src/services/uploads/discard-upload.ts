import { eq } from "drizzle-orm";
import { z } from "zod";
import { uploads } from "@/db/schema";
import { AppError, notFound } from "@/domain/errors";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { dropEdges } from "../ingest/edges";

/** Forgets a file of which nothing was read in: one whose columns were never confirmed, or that failed. */
export async function discardUpload(ctx: Context, input: { uploadId: string }): Promise<{ uploadId: string }> {
  requirePermission(ctx, "upload.create");
  const id = z.uuid().safeParse(input.uploadId);
  if (!id.success) throw notFound("Upload", input.uploadId);
  const uploadId = id.data;
  const keys = await ctx.db.transaction(async (tx) => {
    const [upload] = await tx
      .select({ state: uploads.state, fileName: uploads.fileName, storageKey: uploads.storageKey, rejectsKey: uploads.rejectsKey, feedHour: uploads.feedHour })
      .from(uploads)
      .where(eq(uploads.id, uploadId))
      .for("update");
    if (!upload) throw notFound("Upload", uploadId);
    if (upload.state !== "received" && upload.state !== "failed") {
      throw new AppError("conflict", `${upload.fileName} is being read or has been read in, so it cannot be discarded.`);
    }
    if (upload.feedHour !== null) throw new AppError("conflict", `${upload.fileName} is an hour of a supplier's feed: start it again instead.`);
    await tx.delete(uploads).where(eq(uploads.id, uploadId));
    await recordAudit(tx, ctx, { action: "discarded file", subject: upload.fileName, detail: { uploadId } });
    return [upload.storageKey, upload.rejectsKey];
  });
  for (const key of keys) if (key !== null) await ctx.storage.remove(key);
  await dropEdges(ctx, uploadId);
  return { uploadId };
}
