import { csvResponse } from "@/server/csv-response";
import { route } from "@/server/route";
import { openRejects } from "@/services/uploads/get-upload";

export const GET = route<{ uploadId: string }>(async (ctx, params) => csvResponse(await openRejects(ctx, params), "rejected-rows.csv"));
