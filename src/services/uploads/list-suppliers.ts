import { asc } from "drizzle-orm";
import { z } from "zod";
import { suppliers } from "@/db/schema";
import { UPLOAD_KINDS, type FileMapping } from "@/domain/upload";
import { requirePermission, type Context } from "../context";

export const ListSuppliers = z.object({ kind: z.enum(UPLOAD_KINDS) });
export type ListSuppliers = z.infer<typeof ListSuppliers>;

export interface ListedSupplier {
  id: number;
  name: string;
  mapping: FileMapping | null;
}

export async function listSuppliers(ctx: Context, input: ListSuppliers): Promise<ListedSupplier[]> {
  requirePermission(ctx, "upload.create");
  const { kind } = ListSuppliers.parse(input);
  const rows = await ctx.db
    .select({ id: suppliers.id, name: suppliers.name, mappings: suppliers.mappings })
    .from(suppliers)
    .orderBy(asc(suppliers.name), asc(suppliers.id))
    .limit(500);
  return rows.map(({ id, name, mappings }) => ({ id, name, mapping: mappings[kind] ?? null }));
}
