import { sql } from "drizzle-orm";
import { users } from "@/db/schema";
import { SignIn } from "@/domain/people";
import type { Context } from "../context";
import { recordAudit } from "../audit/record-audit";
import { clearAttempts, takeAttempt } from "./attempts";
import { passwordMatches } from "./passwords";

export interface SignedIn {
  userId: string;
  name: string;
  email: string;
}

/**
 * Null for every kind of failure: unknown account, wrong password, no password yet, disabled, too many attempts.
 * Open to nobody in particular: this is the door.
 */
export async function signIn(ctx: Context, input: SignIn & { address: string }): Promise<SignedIn | null> {
  const form = SignIn.safeParse(input);
  if (!form.success) return null;
  const { email, password } = form.data;
  if (!(await takeAttempt(ctx.db, email, input.address, ctx.now))) return null;

  const [user] = await ctx.db
    .select({
      userId: users.id,
      name: users.name,
      email: users.email,
      role: users.role,
      passwordHash: users.passwordHash,
      disabledAt: users.disabledAt,
    })
    .from(users)
    .where(sql`lower(${users.email}) = ${email}`);
  const matches = await passwordMatches(user?.passwordHash, password);
  if (!user || !matches || user.disabledAt !== null) return null;

  await clearAttempts(ctx.db, email, input.address, ctx.now);
  const actor = { type: "user", userId: user.userId, name: user.name, email: user.email, role: user.role } as const;
  await recordAudit(ctx.db, { actor, now: ctx.now }, { action: "signed in", subject: user.email });
  return { userId: user.userId, name: user.name, email: user.email };
}
