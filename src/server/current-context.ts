import { cache } from "react";
import { actorOfSession } from "@/services/auth/actor-of-session";
import type { Context } from "@/services/context";
import { contextOf } from "./runtime";
import { readSession } from "./session";

/** Session to person to context, once per request. */
export const currentContext = cache(async (): Promise<Context> => {
  // The cookie first: a build that tries a page out learns here that the page needs a request.
  const session = await readSession(new Date());
  const ctx = contextOf({ type: "nobody" });
  if (!session) return ctx;
  const actor = await actorOfSession(ctx.db, { userId: session.userId, issuedAt: new Date(session.signedInAtMs) });
  return { ...ctx, actor };
});
