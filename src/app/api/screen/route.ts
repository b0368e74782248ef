import { screenQueryFromParams } from "@/domain/query-address";
import { route } from "@/server/route";
import { rankJunctions } from "@/services/screens/rank-junctions";

export const GET = route(async (ctx, _params, request) => {
  const query = screenQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  return Response.json(await rankJunctions(ctx, query));
});
