import { stripQueryFromParams } from "@/domain/query-address";
import { csvResponse } from "@/server/csv-response";
import { route } from "@/server/route";
import { exportStrip } from "@/services/strips/export-strip";

export const GET = route<{ legId: string }>(async (ctx, { legId }, request) => {
  const query = stripQueryFromParams(Object.fromEntries(new URL(request.url).searchParams));
  const parts = [query.day, query.turn === "any" ? undefined : query.turn].filter((part) => part !== undefined);
  return csvResponse(await exportStrip(ctx, { legId, query }), `${["leg", legId, "strip", ...parts].join("-")}.csv`);
});
