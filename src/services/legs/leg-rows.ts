import { eq } from "drizzle-orm";
import { legs, junctions } from "@/db/schema";
import type { Db } from "@/db/client";
import { notFound } from "@/domain/errors";
import { reprocessLegs } from "@/jobs/definitions/reprocess-legs";
import { recordAudit } from "../audit/record-audit";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";

export type StoredLeg = typeof legs.$inferSelect;

export async function lockLeg(db: Db, legId: number): Promise<StoredLeg> {
  const [leg] = await db.select().from(legs).where(eq(legs.id, legId)).for("update");
  if (!leg) throw notFound("Leg", legId);
  return leg;
}

/** From now on the junction's legs are what the engineer says: new data derive none beside them. */
export async function settleLegs(db: Db, junctionId: number): Promise<void> {
  await db.update(legs).set({ origin: "set", locked: true, doubts: [] }).where(eq(legs.junctionId, junctionId));
}

/** What every change of a leg brings with it: an audit line, fresh caches, and pings matched anew around the junction. */
export async function afterLegChange(
  ctx: Context,
  db: Db,
  change: { junctionId: number; action: string; subject: string; detail: Record<string, unknown>; rematch: boolean },
): Promise<void> {
  await recordAudit(db, ctx, { action: change.action, subject: change.subject, detail: change.detail });
  await raiseDataVersion(db);
  if (change.rematch) await ctx.queue.enqueue(reprocessLegs, { junctionIds: [change.junctionId] }, { db });
}

export async function junctionName(db: Db, junctionId: number): Promise<string> {
  const [row] = await db.select({ name: junctions.name }).from(junctions).where(eq(junctions.id, junctionId));
  if (!row) throw notFound("Junction", junctionId);
  return row.name;
}
