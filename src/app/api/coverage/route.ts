import { route } from "@/server/route";
import { getCoverage } from "@/services/coverage/get-coverage";

export const GET = route(async (ctx) => Response.json(await getCoverage(ctx)));
