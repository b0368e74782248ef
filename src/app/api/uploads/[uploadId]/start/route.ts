import { AppError } from "@/domain/errors";
import { route } from "@/server/route";
import { startUpload } from "@/services/uploads/start-upload";

export const POST = route<{ uploadId: string }>(async (ctx, { uploadId }, request) => {
  const body = await request.json().catch(() => {
    throw new AppError("invalid", "The request body is not JSON.");
  });
  return Response.json(await startUpload(ctx, { ...body, uploadId }));
});
