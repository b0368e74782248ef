import { and, eq, gt, isNull } from "drizzle-orm";
import { passwordTokens, users } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { SetPassword } from "@/domain/people";
import { recordAudit } from "../audit/record-audit";
import type { Context } from "../context";
import { forgetAccountAttempts } from "./attempts";
import { hashPassword } from "./passwords";
import { hashToken } from "./tokens";

const STALE = "This link has been used or has run out. Ask for a new one.";

/** Open to whoever holds the token. Ends every session of the account that was opened before. */
export async function setPassword(ctx: Context, input: SetPassword): Promise<{ email: string }> {
  const form = SetPassword.parse(input);
  // A password is costly to hash: not for whoever holds no token.
  if ((await tokenPurpose(ctx, form.token)) === null) throw new AppError("invalid", STALE);
  const passwordHash = await hashPassword(form.password);
  return ctx.db.transaction(async (tx) => {
    // Claimed by the update itself: of two requests with one token, one finds it used.
    const [token] = await tx
      .update(passwordTokens)
      .set({ usedAt: ctx.now })
      .where(and(eq(passwordTokens.tokenHash, hashToken(form.token)), isNull(passwordTokens.usedAt), gt(passwordTokens.expiresAt, ctx.now)))
      .returning({ userId: passwordTokens.userId, purpose: passwordTokens.purpose });
    if (!token) throw new AppError("invalid", STALE);
    const [user] = await tx
      .update(users)
      .set({ passwordHash, sessionsValidFrom: ctx.now })
      .where(and(eq(users.id, token.userId), isNull(users.disabledAt)))
      .returning({ email: users.email });
    if (!user) throw new AppError("invalid", STALE);
    await forgetAccountAttempts(tx, user.email.toLowerCase());
    await recordAudit(tx, ctx, { action: token.purpose === "invitation" ? "took up invitation" : "set new password", subject: user.email });
    return user;
  });
}

/** Whether a link still works, for the page that it opens. */
export async function tokenPurpose(ctx: Context, token: string): Promise<"invitation" | "reset" | null> {
  const [row] = await ctx.db
    .select({ purpose: passwordTokens.purpose })
    .from(passwordTokens)
    .where(and(eq(passwordTokens.tokenHash, hashToken(token)), isNull(passwordTokens.usedAt), gt(passwordTokens.expiresAt, ctx.now)));
  return row?.purpose ?? null;
}
