import { route } from "@/server/route";
import { discardUpload } from "@/services/uploads/discard-upload";
import { getUpload } from "@/services/uploads/get-upload";

export const GET = route<{ uploadId: string }>(async (ctx, params) => Response.json(await getUpload(ctx, params)));

export const DELETE = route<{ uploadId: string }>(async (ctx, params) => Response.json(await discardUpload(ctx, params)));
