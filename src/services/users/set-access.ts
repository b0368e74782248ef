import { eq } from "drizzle-orm";
import { passwordTokens, users } from "@/db/schema";
import { PersonRef } from "@/domain/people";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { getPersonForUpdate, refuseSelf } from "./internal";

/** Ends the person's sessions and links at once. */
export async function disablePerson(ctx: Context, input: PersonRef): Promise<void> {
  requirePermission(ctx, "user.manage");
  const { userId } = PersonRef.parse(input);
  refuseSelf(ctx, userId);
  await ctx.db.transaction(async (tx) => {
    const person = await getPersonForUpdate(tx, userId);
    if (person.isDisabled) return;
    await tx.update(users).set({ disabledAt: ctx.now, sessionsValidFrom: ctx.now }).where(eq(users.id, userId));
    await tx.delete(passwordTokens).where(eq(passwordTokens.userId, userId));
    await recordAudit(tx, ctx, { action: "disabled", subject: person.email });
  });
}

export async function enablePerson(ctx: Context, input: PersonRef): Promise<void> {
  requirePermission(ctx, "user.manage");
  const { userId } = PersonRef.parse(input);
  await ctx.db.transaction(async (tx) => {
    const person = await getPersonForUpdate(tx, userId);
    if (!person.isDisabled) return;
    await tx.update(users).set({ disabledAt: null }).where(eq(users.id, userId));
    await recordAudit(tx, ctx, { action: "enabled", subject: person.email });
  });
}
