import { openApiDocument } from "@/server/openapi";
import { route } from "@/server/route";

export const GET = route(async (ctx) => Response.json(openApiDocument(ctx.baseUrl)));
