import { AppError } from "@/domain/errors";
import { PersonRef } from "@/domain/people";
import { sendPasswordMail } from "@/jobs/definitions/send-password-mail";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { getPersonForUpdate } from "./internal";

/** Sends the invitation again, or a link for a new password to someone who has one. */
export async function resendMail(ctx: Context, input: PersonRef): Promise<void> {
  requirePermission(ctx, "user.manage");
  const { userId } = PersonRef.parse(input);
  await ctx.db.transaction(async (tx) => {
    const person = await getPersonForUpdate(tx, userId);
    if (person.isDisabled) throw new AppError("conflict", `${person.email} is disabled. Enable the account first.`);
    const purpose = person.hasPassword ? "reset" : "invitation";
    await ctx.queue.enqueue(sendPasswordMail, { userId, purpose }, { db: tx });
    await recordAudit(tx, ctx, { action: purpose === "reset" ? "sent password link" : "sent invitation again", subject: person.email });
  });
}
