import { and, desc, eq, isNull } from "drizzle-orm";
import { z } from "zod";
import { feedTokens, suppliers, users } from "@/db/schema";
import { notFound } from "@/domain/errors";
import { MakeFeedToken, type FeedTokenView } from "@/domain/feed";
import { recordAudit } from "../audit/record-audit";
import { hashToken, newToken } from "../auth/tokens";
import { requirePermission, type Context } from "../context";

export async function listFeedTokens(ctx: Context): Promise<FeedTokenView[]> {
  requirePermission(ctx, "feed.manage");
  const rows = await ctx.db
    .select({
      id: feedTokens.id,
      supplier: suppliers.name,
      by: users.name,
      createdAt: feedTokens.createdAt,
      lastUsedAt: feedTokens.lastUsedAt,
      revokedAt: feedTokens.revokedAt,
    })
    .from(feedTokens)
    .innerJoin(suppliers, eq(suppliers.id, feedTokens.supplierId))
    .leftJoin(users, eq(users.id, feedTokens.createdBy))
    .orderBy(desc(feedTokens.createdAt), desc(feedTokens.id))
    .limit(100);
  return rows.map((row) => ({
    ...row,
    createdAt: row.createdAt.toISOString(),
    lastUsedAt: row.lastUsedAt?.toISOString() ?? null,
    revokedAt: row.revokedAt?.toISOString() ?? null,
  }));
}

/** The only time that the token itself is seen. */
export async function makeFeedToken(ctx: Context, input: MakeFeedToken): Promise<{ id: string; token: string }> {
  requirePermission(ctx, "feed.manage");
  const { supplier } = MakeFeedToken.parse(input);
  const token = newToken();
  return ctx.db.transaction(async (tx) => {
    await tx.insert(suppliers).values({ name: supplier, mappings: {} }).onConflictDoNothing();
    const [{ supplierId }] = await tx.select({ supplierId: suppliers.id }).from(suppliers).where(eq(suppliers.name, supplier));
    const [{ id }] = await tx
      .insert(feedTokens)
      .values({ tokenHash: hashToken(token), supplierId, createdBy: ctx.actor.type === "user" ? ctx.actor.userId : null, createdAt: ctx.now })
      .returning({ id: feedTokens.id });
    await recordAudit(tx, ctx, { action: "made feed token", subject: supplier, detail: { tokenId: id } });
    return { id, token };
  });
}

/** From now on the token opens nothing; what came with it stays. */
export async function revokeFeedToken(ctx: Context, input: { id: string }): Promise<{ id: string }> {
  requirePermission(ctx, "feed.manage");
  const id = z.uuid().safeParse(input.id);
  if (!id.success) throw notFound("Token", input.id);
  return ctx.db.transaction(async (tx) => {
    const [row] = await tx
      .update(feedTokens)
      .set({ revokedAt: ctx.now })
      .where(and(eq(feedTokens.id, id.data), isNull(feedTokens.revokedAt)))
      .returning({ supplierId: feedTokens.supplierId });
    if (!row) throw notFound("Valid token", input.id);
    const [{ name }] = await tx.select({ name: suppliers.name }).from(suppliers).where(eq(suppliers.id, row.supplierId));
    await recordAudit(tx, ctx, { action: "revoked feed token", subject: name, detail: { tokenId: id.data } });
    return { id: id.data };
  });
}
