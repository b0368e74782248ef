import { eq } from "drizzle-orm";
import type { Db } from "@/db/client";
import { users } from "@/db/schema";
import type { Actor } from "@/domain/actor";

/** Reads name and role afresh, so that a disabled or changed account loses its access with the next request. */
export async function actorOfSession(db: Db, session: { userId: string; issuedAt: Date }): Promise<Actor> {
  const [user] = await db
    .select({
      userId: users.id,
      name: users.name,
      email: users.email,
      role: users.role,
      disabledAt: users.disabledAt,
      sessionsValidFrom: users.sessionsValidFrom,
    })
    .from(users)
    .where(eq(users.id, session.userId));
  if (!user || user.disabledAt !== null || session.issuedAt < user.sessionsValidFrom) return { type: "nobody" };
  return { type: "user", userId: user.userId, name: user.name, email: user.email, role: user.role };
}
