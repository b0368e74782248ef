import { desc } from "drizzle-orm";
import { hotspotReports } from "@/db/schema";
import type { ListedReport } from "@/domain/screen";
import { requirePermission, type Context } from "../context";

export async function listReports(ctx: Context): Promise<ListedReport[]> {
  requirePermission(ctx, "hotspots.view");
  const rows = await ctx.db
    .select({ id: hotspotReports.id, title: hotspotReports.title, publishedAt: hotspotReports.publishedAt })
    .from(hotspotReports)
    .orderBy(desc(hotspotReports.publishedAt), desc(hotspotReports.id))
    .limit(100);
  return rows.map((row) => ({ ...row, publishedAt: row.publishedAt.toISOString() }));
}
