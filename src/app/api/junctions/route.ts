import { route } from "@/server/route";
import { listJunctions } from "@/services/junctions/list-junctions";

export const GET = route(async (ctx, _params, request) => {
  return Response.json(await listJunctions(ctx, { q: new URL(request.url).searchParams.get("q") ?? "" }));
});
