import { asc } from "drizzle-orm";
import { corridors } from "@/db/schema";
import type { CorridorName } from "@/domain/screen";
import { requirePermission, type Context } from "../context";

export async function listCorridors(ctx: Context): Promise<CorridorName[]> {
  requirePermission(ctx, "screen.view");
  return ctx.db.select({ id: corridors.id, name: corridors.name }).from(corridors).orderBy(asc(corridors.name), asc(corridors.id)).limit(1000);
}
