import { eq } from "drizzle-orm";
import { users } from "@/db/schema";
import { ChangeRole } from "@/domain/people";
import { recordAudit } from "../audit/record-audit";
import { requirePermission, type Context } from "../context";
import { getPersonForUpdate, refuseSelf } from "./internal";

/** Takes hold with the person's next request: the role is read afresh each time. */
export async function changeRole(ctx: Context, input: ChangeRole): Promise<void> {
  requirePermission(ctx, "user.manage");
  const { userId, role } = ChangeRole.parse(input);
  refuseSelf(ctx, userId);
  await ctx.db.transaction(async (tx) => {
    const person = await getPersonForUpdate(tx, userId);
    if (person.role === role) return;
    await tx.update(users).set({ role }).where(eq(users.id, userId));
    await recordAudit(tx, ctx, { action: "changed role", subject: person.email, detail: { from: person.role, to: role } });
  });
}
