import { stripQueryFromParams } from "@/domain/query-address";
import { route } from "@/server/route";
import { getTracks } from "@/services/strips/get-tracks";

export const GET = route<{ legId: string }>(async (ctx, { legId }, request) => {
  const query = stripQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  return new Response(await getTracks(ctx, { legId, query }), {
    headers: { "content-type": "application/octet-stream", "cache-control": "private, no-cache" },
  });
});
