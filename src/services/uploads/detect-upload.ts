import { eq } from "drizzle-orm";
import { z } from "zod";
import { uploads } from "@/db/schema";
import { notFound } from "@/domain/errors";
import { DELIMITERS, type Detection } from "@/domain/upload";
import { detect, DETECT_BYTES } from "@/formats/detect/detect";
import { peek } from "@/formats/peek";
import { requirePermission, type Context } from "../context";

export const DetectUpload = z.object({
  uploadId: z.string(),
  /** What the person has settled; the rest is found out. */
  delimiter: z.enum(DELIMITERS).optional(),
  header: z.enum(["yes", "no"]).optional(),
});
export type DetectUpload = z.infer<typeof DetectUpload>;

/** What a received file seems to be, looked at afresh: for the page on which its mapping is settled. */
export async function detectUpload(ctx: Context, input: DetectUpload): Promise<Detection> {
  requirePermission(ctx, "upload.create");
  const { uploadId, delimiter, header } = DetectUpload.parse(input);
  const id = z.uuid().safeParse(uploadId);
  const columns = { kind: uploads.kind, fileName: uploads.fileName, storageKey: uploads.storageKey };
  const [row] = id.success ? await ctx.db.select(columns).from(uploads).where(eq(uploads.id, id.data)) : [];
  if (!row) throw notFound("Upload", uploadId);
  const stream = await ctx.storage.open(row.storageKey);
  try {
    const { head } = await peek(stream, DETECT_BYTES);
    return detect(head, row.fileName, row.kind, { delimiter, hasHeader: header === undefined ? undefined : header === "yes" });
  } finally {
    stream.destroy();
  }
}
