import { csvResponse } from "@/server/csv-response";
import { route } from "@/server/route";
import { exportReport } from "@/services/reports/get-report";

export const GET = route<{ reportId: string }>(async (ctx, params) => csvResponse(await exportReport(ctx, params), "hotspot-report.csv"));
