import { answerArriving } from "@/server/arriving";
import { route } from "@/server/route";

const goOn = route<{ partId: string }>((ctx, { partId }, request) => answerArriving(ctx, request, partId));

export { goOn as DELETE, goOn as HEAD, goOn as PATCH };
