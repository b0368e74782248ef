import { route } from "@/server/route";
import { getPingCloud } from "@/services/legs/get-ping-cloud";

export const GET = route<{ junctionId: string }>((ctx, params) => getPingCloud(ctx, params));
