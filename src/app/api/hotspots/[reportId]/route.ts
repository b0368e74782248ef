import { route } from "@/server/route";
import { getReport } from "@/services/reports/get-report";

export const GET = route<{ reportId: string }>(async (ctx, params) => Response.json(await getReport(ctx, params)));
