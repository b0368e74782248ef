import { route } from "@/server/route";
import { detectUpload, type DetectUpload } from "@/services/uploads/detect-upload";

export const GET = route<{ uploadId: string }>(async (ctx, { uploadId }, request) => {
  const settled = Object.fromEntries(new URL(request.url).searchParams);
  return Response.json(await detectUpload(ctx, { ...settled, uploadId } as DetectUpload));
});
