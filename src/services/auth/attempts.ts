import { eq, inArray, lt, or, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { signInAttempts } from "@/db/schema";

export const WINDOW_MINUTES = 15;
/** Failures within the window after which an account has to wait at one address, at all of them, and an address for all accounts. */
export const PAIR_LIMIT = 5;
/** High, so that a stranger who guesses from one place does not shut the account for its owner. */
export const ACCOUNT_LIMIT = 50;
export const ADDRESS_LIMIT = 20;

const accountKey = (email: string) => `account:${email}`;
const pairsOf = (email: string) => `pair:${email} `;
const pairKey = (email: string, address: string) => pairsOf(email) + address;

function limits(email: string, address: string): { key: string; limit: number }[] {
  return [
    { key: pairKey(email, address), limit: PAIR_LIMIT },
    { key: `address:${address}`, limit: ADDRESS_LIMIT },
    { key: accountKey(email), limit: ACCOUNT_LIMIT },
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
  for (const { key, limit } of limits(email, address)) {
    // What is refused here already counts no further, or one address alone would fill the account's own limit.
    if ((await countFailure(db, key, now)) > limit) return false;
  }
  return true;
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

/** After a success the account starts afresh at this address; the other two counts get their one attempt back, and no more. */
export async function clearAttempts(db: Db, email: string, address: string, now: Date): Promise<void> {
  await db.delete(signInAttempts).where(eq(signInAttempts.key, pairKey(email, address)));
  await db
    .update(signInAttempts)
    .set({ failures: sql`greatest(0, ${signInAttempts.failures} - 1)` })
    .where(inArray(signInAttempts.key, [accountKey(email), `address:${address}`]));
  await db.delete(signInAttempts).where(lt(signInAttempts.windowStart, windowOpenedAfter(now)));
}

/** Whoever has set a new password by mail is the owner: all that was counted against the account is forgotten. */
export async function forgetAccountAttempts(db: Db, email: string): Promise<void> {
  await db.delete(signInAttempts).where(or(eq(signInAttempts.key, accountKey(email)), sql`starts_with(${signInAttempts.key}, ${pairsOf(email)})`));
}
