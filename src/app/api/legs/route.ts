import { route } from "@/server/route";
import { listLegsToCheck } from "@/services/legs/list-legs-to-check";

export const GET = route((ctx) => listLegsToCheck(ctx));
