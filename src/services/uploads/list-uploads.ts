import type { UploadView } from "@/domain/upload";
import { requirePermission, type Context } from "../context";
import { readUploads } from "./upload-view";

export async function listUploads(ctx: Context): Promise<UploadView[]> {
  requirePermission(ctx, "upload.view");
  return readUploads(ctx.db, {}, 100);
}
