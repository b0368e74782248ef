import { desc } from "drizzle-orm";
import { hotspotReports } from "@/db/schema";
import { requirePermission, type Context } from "../context";

export interface ListedReport {
  id: string;
  title: string;
  publishedAt: string;
}

export async function listReports(ctx: Context): Promise<ListedReport[]> {
  requirePermission(ctx, "hotspots.view");
  const rows = await ctx.db
    .select({ id: hotspotReports.id, title: hotspotReports.title, publishedAt: hotspotReports.publishedAt })
    .from(hotspotReports)
    .orderBy(desc(hotspotReports.publishedAt), desc(hotspotReports.id))
    .limit(100);
  return rows.map((row) => ({ ...row, publishedAt: row.publishedAt.toISOString() }));
}
