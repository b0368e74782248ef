import type { Readable } from "node:stream";
import { eq } from "drizzle-orm";
import { z } from "zod";
import { uploads } from "@/db/schema";
import { notFound } from "@/domain/errors";
import type { UploadView } from "@/domain/upload";
import { requirePermission, type Context } from "../context";
import { readUploads } from "./upload-view";

function uploadIdOf(text: string): string {
  const id = z.uuid().safeParse(text);
  if (!id.success) throw notFound("Upload", text);
  return id.data;
}

export async function getUpload(ctx: Context, input: { uploadId: string }): Promise<UploadView> {
  requirePermission(ctx, "upload.view");
  const [view] = await readUploads(ctx.db, { id: uploadIdOf(input.uploadId) }, 1);
  if (!view) throw notFound("Upload", input.uploadId);
  return view;
}

/** The rejected rows as CSV: line, reason, the row. */
export async function openRejects(ctx: Context, input: { uploadId: string }): Promise<Readable> {
  requirePermission(ctx, "upload.view");
  const [row] = await ctx.db.select({ key: uploads.rejectsKey }).from(uploads).where(eq(uploads.id, uploadIdOf(input.uploadId)));
  if (!row?.key) throw notFound("List of rejected rows of upload", input.uploadId);
  return ctx.storage.open(row.key);
}
