import { and, eq, sql } from "drizzle-orm";
import { z } from "zod";
import { suppliers, uploads } from "@/db/schema";
import { AppError, notFound } from "@/domain/errors";
import { isTimeZone } from "@/domain/settings";
import { FileMapping, isLocalTime, neededFields } from "@/domain/upload";
import { ingestUpload } from "@/jobs/definitions/ingest-upload";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";

export const StartUpload = z.object({
  uploadId: z.uuid(),
  mapping: FileMapping,
  supplier: z.string().trim().max(80).nullable(),
});
export type StartUpload = z.infer<typeof StartUpload>;

/** Queues the ingest with the mapping that the person settled on. Starting twice queues once. */
export async function startUpload(ctx: Context, input: StartUpload): Promise<{ uploadId: string }> {
  requirePermission(ctx, "upload.create");
  const { uploadId, mapping, supplier } = StartUpload.parse(input);
  return ctx.db.transaction(async (tx) => {
    const [upload] = await tx
      .select({ id: uploads.id, kind: uploads.kind, state: uploads.state, fileName: uploads.fileName, feedHour: uploads.feedHour })
      .from(uploads)
      .where(eq(uploads.id, uploadId))
      .for("update");
    if (!upload) throw notFound("Upload", uploadId);
    if (upload.state === "waiting" || upload.state === "reading") return { uploadId };
    if (upload.state === "done") throw new AppError("conflict", `${upload.fileName} has been read in already.`);
    checkMapping(neededFields(upload.kind, mapping.format), mapping);
    // The hour of a feed was written by ourselves: how it is read is settled.
    const read = upload.feedHour === null ? { mapping, supplierId: supplier ? await rememberMapping(tx, supplier, upload.kind, mapping) : null } : {};
    await tx
      .update(uploads)
      .set({ ...read, state: "waiting", failure: null, progress: null, report: null, finishedAt: null })
      .where(and(eq(uploads.id, uploadId)));
    await ctx.queue.enqueue(ingestUpload, { uploadId }, { db: tx });
    await recordAudit(tx, ctx, { action: "started reading file", subject: upload.fileName, detail: { uploadId, supplier } });
    return { uploadId };
  });
}

function checkMapping(needs: readonly string[], mapping: FileMapping): void {
  const missing = needs.filter((field) => mapping.columns[field] === undefined);
  if (missing.length > 0) {
    throw new AppError("invalid", `Say which column holds ${missing.join(", ")}.`, {
      fieldErrors: Object.fromEntries(missing.map((field) => [`columns.${field}`, ["Choose a column."]])),
    });
  }
  if (isLocalTime(mapping.timeFormat) && !isTimeZone(mapping.timeZone)) {
    throw new AppError("invalid", `${mapping.timeZone} is not a time zone that this server knows.`);
  }
}

async function rememberMapping(db: Context["db"], name: string, kind: string, mapping: FileMapping): Promise<number> {
  const [row] = await db
    .insert(suppliers)
    .values({ name, mappings: { [kind]: mapping } })
    .onConflictDoUpdate({
      target: suppliers.name,
      set: { mappings: sql`${suppliers.mappings} || ${JSON.stringify({ [kind]: mapping })}::jsonb` },
    })
    .returning({ id: suppliers.id });
  return row.id;
}
