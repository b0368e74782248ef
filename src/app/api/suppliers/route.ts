import { route } from "@/server/route";
import { listSuppliers, type ListSuppliers } from "@/services/uploads/list-suppliers";

export const GET = route(async (ctx, _params, request) => {
  const kind = new URL(request.url).searchParams.get("kind") ?? "";
  return Response.json(await listSuppliers(ctx, { kind } as ListSuppliers));
});
