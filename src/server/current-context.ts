import { cache } from "react";
import { actorOfSession } from "@/services/auth/actor-of-session";
import type { Context } from "@/services/context";
import { contextOf } from "./runtime";
import { readSession } from "./session";

/** Session to person to context, once per request. */
export const currentContext = cache(async (): Promise<Context> => {
  const ctx = contextOf({ type: "nobody" });
  const session = await readSession(ctx.now);
  if (!session) return ctx;
  const actor = await actorOfSession(ctx.db, { userId: session.userId, issuedAt: new Date(session.signedInAtMs) });
  return { ...ctx, actor };
});
