import { screenQueryFromParams } from "@/domain/query-address";
import { route } from "@/server/route";
import { getJunction } from "@/services/junctions/get-junction";

export const GET = route<{ junctionId: string }>(async (ctx, { junctionId }, request) => {
  const when = screenQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  return Response.json(await getJunction(ctx, { junctionId, when }));
});
