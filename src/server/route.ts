import { unstable_rethrow } from "next/navigation";
import type { Context } from "@/services/context";
import { currentContext } from "./current-context";
import { STATUS_OF_CODE, toProblem } from "./problem";
import { requireSameOrigin } from "./same-origin";

/** The windows in which calls are counted are no shorter. */
const RETRY_AFTER_S = "60";

type RouteParams = Record<string, string | string[]>;

/**
 * Wraps a route handler: builds the context, refuses foreign changes, maps problems to status codes.
 * A handler answers with a Response, or with data that is sent as JSON.
 */
export function route<P extends RouteParams = Record<string, never>>(
  handle: (ctx: Context, params: P, request: Request) => Promise<unknown>,
) {
  return async (request: Request, segment: { params: Promise<P> }): Promise<Response> => {
    try {
      requireSameOrigin(request);
      const answer = await handle(await currentContext(), await segment.params, request);
      if (answer instanceof Response) return answer;
      return Response.json(answer ?? null, { headers: { "cache-control": "private, no-store" } });
    } catch (error) {
      unstable_rethrow(error);
      // Who left in the middle reads no answer, and did nothing that the log should call a fault.
      if (request.signal.aborted) return new Response(null, { status: STATUS_OF_CODE.invalid });
      const problem = toProblem(error);
      const headers = { "cache-control": "no-store", ...(problem.code === "too_many" && { "retry-after": RETRY_AFTER_S }) };
      return Response.json(problem, { status: STATUS_OF_CODE[problem.code], headers });
    }
  };
}
