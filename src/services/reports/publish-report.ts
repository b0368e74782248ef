import { z } from "zod";
import { hotspotReports } from "@/db/schema";
import { ScreenQuery } from "@/domain/screen";
import { applyScreenFilter } from "@/domain/screen-filter";
import { AppError } from "@/domain/errors";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { rankCity } from "../screens/rank-junctions";

export const PublishReport = z.object({
  title: z.string().trim().min(3, "Give the report a title of at least three letters.").max(120),
  query: ScreenQuery,
});
export type PublishReport = z.infer<typeof PublishReport>;

const LONGEST_REPORT = 200;

/** Freezes the list as it stands: what the council read stays what it was. */
export async function publishReport(ctx: Context, input: PublishReport): Promise<{ id: string }> {
  requirePermission(ctx, "hotspots.publish");
  const { title, query } = PublishReport.parse(input);
  if (ctx.actor.type !== "user") throw new AppError("forbidden", "Reports are published by people.");
  const result = await rankCity(ctx, query);
  const rows = applyScreenFilter(result.rows, query).slice(0, LONGEST_REPORT);
  if (rows.length === 0) throw new AppError("invalid", "No junction passes these filters: there is nothing to publish.");
  const publishedBy = ctx.actor.userId;
  return ctx.db.transaction(async (tx) => {
    const [row] = await tx
      .insert(hotspotReports)
      .values({ title, query, result: { ...result, rows }, publishedBy, publishedAt: ctx.now })
      .returning({ id: hotspotReports.id });
    await recordAudit(tx, ctx, { action: "published report", subject: title, detail: { reportId: row.id } });
    return row;
  });
}
