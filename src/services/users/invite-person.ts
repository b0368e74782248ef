import { users } from "@/db/schema";
import { AppError } from "@/domain/errors";
import { InvitePerson } from "@/domain/people";
import { sendPasswordMail } from "@/jobs/definitions/send-password-mail";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";

export async function invitePerson(ctx: Context, input: InvitePerson): Promise<{ userId: string }> {
  requirePermission(ctx, "user.manage");
  const person = InvitePerson.parse(input);
  return ctx.db.transaction(async (tx) => {
    const [row] = await tx
      .insert(users)
      .values({ ...person, sessionsValidFrom: ctx.now, createdAt: ctx.now })
      .onConflictDoNothing()
      .returning({ userId: users.id });
    if (!row) {
      const message = `${person.email} has an account already.`;
      throw new AppError("conflict", message, { fieldErrors: { email: [message] } });
    }
    await recordAudit(tx, ctx, { action: "invited", subject: person.email, detail: { role: person.role } });
    await ctx.queue.enqueue(sendPasswordMail, { userId: row.userId, purpose: "invitation" }, { db: tx });
    return row;
  });
}
