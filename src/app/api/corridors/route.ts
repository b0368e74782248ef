import { route } from "@/server/route";
import { listCorridors } from "@/services/corridors/list-corridors";

export const GET = route(async (ctx) => Response.json(await listCorridors(ctx)));
