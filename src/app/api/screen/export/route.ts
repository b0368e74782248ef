import { screenQueryFromParams } from "@/domain/query-address";
import { csvResponse } from "@/server/csv-response";
import { route } from "@/server/route";
import { exportScreen } from "@/services/screens/export-screen";

export const GET = route(async (ctx, _params, request) => {
  const query = screenQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  return csvResponse(await exportScreen(ctx, query), "ranked-junctions.csv");
});
