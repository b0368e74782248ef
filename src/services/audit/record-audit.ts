import type { Db } from "@/db/client";
import { auditEvents } from "@/db/schema";
import type { Context } from "../context";

export interface AuditEntry {
  /** Verb phrase in the past: "invited", "changed role". */
  action: string;
  subject: string;
  detail?: Record<string, unknown>;
}

/** Writes one line of the audit trail, in the transaction of the change that it tells of. */
export async function recordAudit(db: Db, ctx: Pick<Context, "actor" | "now">, entry: AuditEntry): Promise<void> {
  const { actor } = ctx;
  await db.insert(auditEvents).values({
    at: ctx.now,
    userId: actor.type === "user" ? actor.userId : null,
    actor: actor.type === "user" ? actor.email : actor.type === "job" ? `worker: ${actor.job}` : "somebody not signed in",
    action: entry.action,
    subject: entry.subject,
    detail: entry.detail ?? {},
  });
}
