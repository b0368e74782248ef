import { count, eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { users } from "@/db/schema";
import { ROLES, type Role } from "@/domain/actor";
import type { Env } from "@/env";
import { openQueue } from "@/jobs/queue";
import { sendPasswordMail } from "@/jobs/definitions/send-password-mail";
import { hashPassword } from "@/services/auth/passwords";

export interface DemoAccount {
  role: Role;
  name: string;
  email: string;
  password: string;
}

const NAMES: Record<Role, string> = {
  engineer: "Edda Marsh",
  technician: "Tomas Quill",
  reader: "Runa Vale",
  admin: "Alba Thorne",
};

/** Known to everyone who reads this file: made in demo, development and tests only. */
export const DEMO_ACCOUNTS: readonly DemoAccount[] = ROLES.map((role) => ({
  role,
  name: NAMES[role],
  email: `${role}@varnmouth.example`,
  password: `varnmouth-${role}`,
}));

/** Makes the four accounts in an empty database; answers those whose printed password may still hold. */
export async function seedDemoAccounts(db: Db): Promise<readonly DemoAccount[]> {
  const [{ people }] = await db.select({ people: count() }).from(users);
  if (people > 0) {
    const [known] = await db.select({ id: users.id }).from(users).where(eq(users.email, DEMO_ACCOUNTS[0].email));
    return known ? DEMO_ACCOUNTS : [];
  }
  const rows = await Promise.all(
    DEMO_ACCOUNTS.map(async ({ email, name, role, password }) => ({ email, name, role, passwordHash: await hashPassword(password) })),
  );
  await db.insert(users).values(rows);
  return DEMO_ACCOUNTS;
}

/** Production begins with one invitation, to the address that the environment names. */
export async function inviteFirstAdmin(db: Db, settings: Env): Promise<string[]> {
  const [{ people }] = await db.select({ people: count() }).from(users);
  if (people > 0) return [];
  const email = settings.ADMIN_EMAIL?.toLowerCase();
  if (!email) return ["Nobody has an account yet: set ADMIN_EMAIL and start again, to send the first invitation."];
  const queue = openQueue(db);
  await db.transaction(async (tx) => {
    const [user] = await tx.insert(users).values({ email, name: email.split("@")[0], role: "admin" }).returning({ userId: users.id });
    await queue.enqueue(sendPasswordMail, { userId: user.userId, purpose: "invitation" }, { db: tx });
  });
  await queue.stop();
  return [`An invitation for the first administrator goes to ${email}.`];
}
