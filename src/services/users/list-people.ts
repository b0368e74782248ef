import { asc, sql } from "drizzle-orm";
import { users } from "@/db/schema";
import type { PersonState, PersonView } from "@/domain/people";
import { requirePermission, type Context } from "../context";

const MAX_PEOPLE = 1000;

export async function listPeople(ctx: Context): Promise<PersonView[]> {
  requirePermission(ctx, "user.manage");
  const rows = await ctx.db
    .select({
      userId: users.id,
      email: users.email,
      name: users.name,
      role: users.role,
      state: sql<PersonState>`case when ${users.disabledAt} is not null then 'disabled' when ${users.passwordHash} is null then 'invited' else 'active' end`,
    })
    .from(users)
    .orderBy(asc(sql`lower(${users.name})`), asc(users.id))
    .limit(MAX_PEOPLE);
  const self = ctx.actor.type === "user" ? ctx.actor.userId : null;
  return rows.map((row) => ({ ...row, isSelf: row.userId === self }));
}
