import { and, isNull, sql } from "drizzle-orm";
import { users } from "@/db/schema";
import { sendPasswordMail } from "@/jobs/definitions/send-password-mail";
import { AskForReset } from "@/domain/people";
import { AppError } from "@/domain/errors";
import type { Context } from "../context";
import { takeReset } from "./attempts";

/**
 * Answers the same whether or not there is such an account. Open to all; limited by address.
 * Someone who never took up the invitation gets that mail again.
 */
export async function askForReset(ctx: Context, input: AskForReset & { address: string }): Promise<void> {
  const { email } = AskForReset.parse(input);
  if (!(await takeReset(ctx.db, input.address, ctx.now))) {
    throw new AppError("too_many", "Too many requests from this address. Try again in a quarter of an hour.");
  }
  const [user] = await ctx.db
    .select({ userId: users.id, passwordHash: users.passwordHash })
    .from(users)
    .where(and(sql`lower(${users.email}) = ${email}`, isNull(users.disabledAt)));
  if (!user) return;
  await ctx.queue.enqueue(sendPasswordMail, { userId: user.userId, purpose: user.passwordHash === null ? "invitation" : "reset" });
}
