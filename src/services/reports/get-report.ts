import { eq } from "drizzle-orm";
import { z } from "zod";
import { hotspotReports } from "@/db/schema";
import { notFound } from "@/domain/errors";
import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { requirePermission, type Context } from "../context";
import { screenCsv } from "../screens/export-screen";

export interface HotspotReport {
  id: string;
  title: string;
  publishedAt: string;
  query: ScreenQuery;
  result: ScreenResult;
}

export async function getReport(ctx: Context, input: { reportId: string }): Promise<HotspotReport> {
  requirePermission(ctx, "hotspots.view");
  const id = z.uuid().safeParse(input.reportId);
  if (!id.success) throw notFound("Report", input.reportId);
  const [row] = await ctx.db
    .select({
      id: hotspotReports.id,
      title: hotspotReports.title,
      publishedAt: hotspotReports.publishedAt,
      query: hotspotReports.query,
      result: hotspotReports.result,
    })
    .from(hotspotReports)
    .where(eq(hotspotReports.id, id.data));
  if (!row) throw notFound("Report", input.reportId);
  return { ...row, publishedAt: row.publishedAt.toISOString() };
}

export async function exportReport(ctx: Context, input: { reportId: string }): Promise<AsyncGenerator<string>> {
  const report = await getReport(ctx, input);
  return screenCsv(report.result.rows, report.result.basis, report.query);
}
