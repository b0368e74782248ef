import { screenQueryFromParams } from "@/domain/query-address";
import { route } from "@/server/route";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { screenTag } from "@/services/screens/screen-tag";

/** Kept by the browser, and asked for each time: as long as nothing has changed the answer is an empty 304. */
export const GET = route(async (ctx, _params, request) => {
  const query = screenQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  const tag = await screenTag(ctx, query);
  const headers = { etag: tag, "cache-control": "private, no-cache", vary: "cookie" };
  const isKept = request.headers.get("if-none-match")?.split(/,\s*/u).includes(tag) ?? false;
  return isKept ? new Response(null, { status: 304, headers }) : Response.json(await rankJunctions(ctx, query), { headers });
});
