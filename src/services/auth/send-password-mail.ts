import { and, eq, isNull } from "drizzle-orm";
import { passwordTokens, users } from "@/db/schema";
import { AppError, notFound } from "@/domain/errors";
import { getSettings } from "../settings/get-settings";
import type { Context } from "../context";
import { passwordMail } from "./password-mail";
import { hashToken, newToken } from "./tokens";

export type PasswordMailPurpose = "invitation" | "reset";

export const VALID_HOURS: Record<PasswordMailPurpose, number> = { invitation: 7 * 24, reset: 1 };

/** Runs in the worker. A new mail makes links of earlier ones void; run twice, the later link holds. */
export async function sendPasswordMail(ctx: Context, input: { userId: string; purpose: PasswordMailPurpose }): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Password mail is sent by the worker only.");
  const { userId, purpose } = input;
  const [user] = await ctx.db
    .select({ email: users.email, name: users.name, role: users.role, disabledAt: users.disabledAt })
    .from(users)
    .where(eq(users.id, userId));
  if (!user) throw notFound("Person", userId);
  if (user.disabledAt !== null) throw new AppError("invalid", `${user.email} is disabled.`);

  const token = newToken();
  const expiresAt = new Date(ctx.now.getTime() + VALID_HOURS[purpose] * 3_600_000);
  await ctx.db.transaction(async (tx) => {
    await tx.delete(passwordTokens).where(and(eq(passwordTokens.userId, userId), isNull(passwordTokens.usedAt)));
    await tx.insert(passwordTokens).values({ tokenHash: hashToken(token), userId, purpose, expiresAt });
  });
  const { cityName } = await getSettings(ctx);
  const link = `${ctx.baseUrl}/set-password?token=${token}`;
  await ctx.mailer.send({ to: user.email, ...passwordMail({ ...user, purpose, cityName, link, validHours: VALID_HOURS[purpose] }) });
}
