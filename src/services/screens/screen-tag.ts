import { METHOD_VERSION } from "@/core/method-version";
import { ScreenQuery } from "@/domain/screen";
import { dataStamp } from "../catalogue/catalogue";
import { requirePermission, type Context } from "../context";
import { getSettings } from "../settings/get-settings";
import { windowOf } from "./score-city";

/** Raised with the shape of a ranked row. */
const SHAPE = 1;

/** The same as long as the ranking for a query is: what the data, the method and the query make of it. Weak, since bytes may be packed. */
export async function screenTag(ctx: Context, input: ScreenQuery): Promise<string> {
  requirePermission(ctx, "screen.view");
  const query = ScreenQuery.parse(input);
  const [settings, stamp] = await Promise.all([getSettings(ctx), dataStamp(ctx.db)]);
  const { fromMin, toMin } = windowOf(settings, query);
  return `W/"${[SHAPE, METHOD_VERSION, stamp, fromMin, toMin, query.days, query.since ?? "", query.until ?? "", query.turn].join(".")}"`;
}
