import { route } from "@/server/route";
import { getLegCheck } from "@/services/legs/get-leg-check";

export const GET = route<{ junctionId: string }>((ctx, params) => getLegCheck(ctx, params));
