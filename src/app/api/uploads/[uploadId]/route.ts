import { route } from "@/server/route";
import { getUpload } from "@/services/uploads/get-upload";

export const GET = route<{ uploadId: string }>(async (ctx, params) => Response.json(await getUpload(ctx, params)));
