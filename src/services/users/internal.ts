import { eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { users } from "@/db/schema";
import { AppError, notFound } from "@/domain/errors";
import type { Role } from "@/domain/actor";
import type { Context } from "../context";

export interface Person {
  userId: string;
  email: string;
  role: Role;
  hasPassword: boolean;
  isDisabled: boolean;
}

/** Locks the row until the transaction ends. */
export async function getPersonForUpdate(db: Db, userId: string): Promise<Person> {
  const [row] = await db
    .select({ userId: users.id, email: users.email, role: users.role, passwordHash: users.passwordHash, disabledAt: users.disabledAt })
    .from(users)
    .where(eq(users.id, userId))
    .for("update");
  if (!row) throw notFound("Person", userId);
  return { userId: row.userId, email: row.email, role: row.role, hasPassword: row.passwordHash !== null, isDisabled: row.disabledAt !== null };
}

/** An administrator cannot lock out themselves, so that one is always left. */
export function refuseSelf(ctx: Context, userId: string): void {
  if (ctx.actor.type === "user" && ctx.actor.userId === userId) {
    throw new AppError("conflict", "You cannot change your own role or access. Ask another administrator.");
  }
}
