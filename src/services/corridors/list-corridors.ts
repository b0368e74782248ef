import { asc } from "drizzle-orm";
import { corridors } from "@/db/schema";
import { requirePermission, type Context } from "../context";

export async function listCorridors(ctx: Context): Promise<{ id: number; name: string }[]> {
  requirePermission(ctx, "screen.view");
  return ctx.db.select({ id: corridors.id, name: corridors.name }).from(corridors).orderBy(asc(corridors.name), asc(corridors.id)).limit(1000);
}
