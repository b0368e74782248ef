import { and, isNull, sql } from "drizzle-orm";
import { users } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { Context } from "../context";
import { sendPasswordMail } from "./send-password-mail";

/** Runs in the worker. An address without an account gets no mail; someone who never took up the invitation gets that one again. */
export async function answerResetRequest(ctx: Context, { email }: { email: string }): Promise<void> {
  if (ctx.actor.type !== "job") throw new AppError("forbidden", "Password mail is sent by the worker only.");
  const [user] = await ctx.db
    .select({ userId: users.id, passwordHash: users.passwordHash })
    .from(users)
    .where(and(sql`lower(${users.email}) = ${email}`, isNull(users.disabledAt)));
  if (user) await sendPasswordMail(ctx, { userId: user.userId, purpose: user.passwordHash === null ? "invitation" : "reset" });
}
