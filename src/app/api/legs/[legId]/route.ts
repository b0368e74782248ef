import { stripQueryFromParams } from "@/domain/query-address";
import { route } from "@/server/route";
import { getLegStrip } from "@/services/strips/get-leg-strip";

export const GET = route<{ legId: string }>(async (ctx, { legId }, request) => {
  const query = stripQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  return Response.json(await getLegStrip(ctx, { legId, query }));
});
