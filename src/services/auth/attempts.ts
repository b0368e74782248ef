import { eq, lt, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { signInAttempts } from "@/db/schema";

export const WINDOW_MINUTES = 15;
/** Failures within the window after which the account, or the address, has to wait. */
export const ACCOUNT_LIMIT = 5;
export const ADDRESS_LIMIT = 20;

function limits(email: string, address: string): { key: string; limit: number }[] {
  return [
    { key: `account:${email}`, limit: ACCOUNT_LIMIT },
    { key: `address:${address}`, limit: ADDRESS_LIMIT },
  ];
}

function windowOpenedAfter(now: Date): Date {
  return new Date(now.getTime() - WINDOW_MINUTES * 60_000);
}

/**
 * Counts an attempt as failed before the password is looked at, and says whether it may be looked at.
 * One statement for each key, so that attempts sent side by side cannot slip through.
 */
export async function takeAttempt(db: Db, email: string, address: string, now: Date): Promise<boolean> {
  let mayTry = true;
  for (const { key, limit } of limits(email, address)) {
    if ((await countFailure(db, key, now)) > limit) mayTry = false;
  }
  return mayTry;
}

/** The same for requests for a new password, which are counted by address alone. */
export async function takeReset(db: Db, address: string, now: Date): Promise<boolean> {
  return (await countFailure(db, `reset:${address}`, now)) <= ADDRESS_LIMIT;
}

async function countFailure(db: Db, key: string, now: Date): Promise<number> {
  const isOver = sql`${signInAttempts.windowStart} <= ${windowOpenedAfter(now).toISOString()}::timestamptz`;
  const [row] = await db
    .insert(signInAttempts)
    .values({ key, failures: 1, windowStart: now })
    .onConflictDoUpdate({
      target: signInAttempts.key,
      set: {
        failures: sql`case when ${isOver} then 1 else ${signInAttempts.failures} + 1 end`,
        windowStart: sql`case when ${isOver} then ${now.toISOString()}::timestamptz else ${signInAttempts.windowStart} end`,
      },
    })
    .returning({ failures: signInAttempts.failures });
  return row.failures;
}

/** After a success: the account starts afresh; the address gets its one attempt back, and no more. */
export async function clearAttempts(db: Db, email: string, address: string, now: Date): Promise<void> {
  await db.delete(signInAttempts).where(eq(signInAttempts.key, `account:${email}`));
  await db
    .update(signInAttempts)
    .set({ failures: sql`greatest(0, ${signInAttempts.failures} - 1)` })
    .where(eq(signInAttempts.key, `address:${address}`));
  await db.delete(signInAttempts).where(lt(signInAttempts.windowStart, windowOpenedAfter(now)));
}
