import { answerArriving } from "@/server/arriving";
import { route } from "@/server/route";

export const POST = route((ctx, _params, request) => answerArriving(ctx, request, null));
