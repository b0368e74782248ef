import { Readable } from "node:stream";
import { csvResponse } from "@/server/csv-response";
import { route } from "@/server/route";
import { openRejects } from "@/services/uploads/get-upload";

export const GET = route<{ uploadId: string }>(async (ctx, params) => {
  const content = await openRejects(ctx, params);
  return csvResponse(Readable.toWeb(content) as ReadableStream<Uint8Array>, "rejected-rows.csv");
});
