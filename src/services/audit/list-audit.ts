import { desc, lt } from "drizzle-orm";
import { z } from "zod";
import { auditEvents } from "@/db/schema";
import type { AuditView } from "@/domain/people";
import { requirePermission, type Context } from "../context";

export const AUDIT_PAGE = 50;

export const ListAudit = z.object({ before: z.coerce.number().int().positive().optional().catch(undefined) });
export type ListAudit = z.input<typeof ListAudit>;

/** Newest first; `before` continues after the last line of the page before. */
export async function listAudit(ctx: Context, input: ListAudit = {}): Promise<AuditView[]> {
  requirePermission(ctx, "audit.view");
  const { before } = ListAudit.parse(input);
  const rows = await ctx.db
    .select()
    .from(auditEvents)
    .where(before === undefined ? undefined : lt(auditEvents.id, before))
    .orderBy(desc(auditEvents.id))
    .limit(AUDIT_PAGE);
  return rows.map(({ id, at, actor, action, subject, detail }) => ({ id, at: at.toISOString(), actor, action, subject, detail }));
}
