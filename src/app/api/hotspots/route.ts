import { route } from "@/server/route";
import { listReports } from "@/services/reports/list-reports";

export const GET = route(async (ctx) => Response.json(await listReports(ctx)));
