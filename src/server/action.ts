import { unstable_rethrow } from "next/navigation";
import type { ActionResult } from "@/domain/errors";
import type { Context } from "@/services/context";
import { currentContext } from "./current-context";
import { toProblem } from "./problem";

export type { ActionResult };

/** Turns a verb into a server action. Next itself refuses calls from other origins. */
export function action<I, O>(verb: (ctx: Context, input: I) => Promise<O>) {
  return async (input: I): Promise<ActionResult<O>> => {
    try {
      return { ok: true, data: await verb(await currentContext(), input) };
    } catch (error) {
      unstable_rethrow(error);
      return { ok: false, ...toProblem(error) };
    }
  };
}
