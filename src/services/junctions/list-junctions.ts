import { asc, eq, ilike, or } from "drizzle-orm";
import { z } from "zod";
import { corridors, junctions } from "@/db/schema";
import type { ListedJunction } from "@/domain/junction";
import { requirePermission, type Context } from "../context";

export const ListJunctions = z.object({ q: z.string().trim().max(80).default("") });
export type ListJunctions = z.infer<typeof ListJunctions>;

export async function listJunctions(ctx: Context, input: ListJunctions): Promise<ListedJunction[]> {
  requirePermission(ctx, "junction.view");
  const { q } = ListJunctions.parse(input);
  const pattern = `%${q.replace(/[\\%_]/g, "\\$&")}%`;
  return ctx.db
    .select({
      id: junctions.id,
      code: junctions.code,
      name: junctions.name,
      lat: junctions.lat,
      lon: junctions.lon,
      corridor: corridors.name,
    })
    .from(junctions)
    .leftJoin(corridors, eq(corridors.id, junctions.corridorId))
    .where(q === "" ? undefined : or(ilike(junctions.name, pattern), ilike(junctions.code, pattern)))
    .orderBy(asc(junctions.name), asc(junctions.id))
    .limit(2000);
}
