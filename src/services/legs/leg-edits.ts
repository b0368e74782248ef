import { eq, sql } from "drizzle-orm";
import { settings } from "@/db/schema";
import type { Db } from "@/db/client";

const LEG_EDITS = "leg_edits";

/** Legs were changed by hand while a job worked with the former ones: what it found does not fit any more. */
export class LegsChanged extends Error {
  constructor() {
    super("Legs were changed by hand while pings were matched to them.");
    this.name = "LegsChanged";
  }
}

/** First statement of every change of legs by hand: jobs see that what they read is out of date. */
export async function noteLegEdit(db: Db): Promise<void> {
  await db
    .insert(settings)
    .values({ key: LEG_EDITS, value: 1 })
    .onConflictDoUpdate({ target: settings.key, set: { value: sql`to_jsonb((${settings.value})::text::int + 1)`, updatedAt: sql`now()` } });
}

/** Number of changes so far; a job reads it before the legs. */
export async function legEdits(db: Db): Promise<number> {
  const [row] = await db.select({ value: settings.value }).from(settings).where(eq(settings.key, LEG_EDITS));
  return row ? Number(row.value) : 0;
}

/**
 * First statement of a transaction that writes legs which were read earlier: throws `LegsChanged` where somebody has
 * changed legs since, and lets nobody change them until the transaction ends.
 */
export async function requireSameLegs(db: Db, seen: number): Promise<void> {
  const [row] = await db
    .insert(settings)
    .values({ key: LEG_EDITS, value: 0 })
    .onConflictDoUpdate({ target: settings.key, set: { value: sql`${settings.value}` } })
    .returning({ value: settings.value });
  if (Number(row.value) !== seen) throw new LegsChanged();
}
