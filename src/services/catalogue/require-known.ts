import { eq } from "drizzle-orm";
import { junctions, legs } from "@/db/schema";
import { notFound } from "@/domain/errors";
import { RowKey } from "@/domain/row-key";
import { requirePermission, type Context } from "../context";

/** Resolves if the junction exists; one look-up by key, for what must be known before the figures are read. */
export async function requireJunction(ctx: Context, input: { junctionId: string }): Promise<void> {
  requirePermission(ctx, "junction.view");
  const id = RowKey.safeParse(input.junctionId);
  if (!id.success) throw notFound("Junction", input.junctionId);
  const [row] = await ctx.db.select({ id: junctions.id }).from(junctions).where(eq(junctions.id, id.data));
  if (!row) throw notFound("Junction", input.junctionId);
}

/** Resolves if the leg exists; see requireJunction. */
export async function requireLeg(ctx: Context, input: { legId: string }): Promise<void> {
  requirePermission(ctx, "strip.view");
  const id = RowKey.safeParse(input.legId);
  if (!id.success) throw notFound("Leg", input.legId);
  const [row] = await ctx.db.select({ id: legs.id }).from(legs).where(eq(legs.id, id.data));
  if (!row) throw notFound("Leg", input.legId);
}
