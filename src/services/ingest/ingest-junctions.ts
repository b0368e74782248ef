import { inArray, sql } from "drizzle-orm";
import { corridors, junctions } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { FileMapping, IngestReport } from "@/domain/upload";
import { readJunctions, type JunctionRow } from "@/formats/junctions/read-junctions";
import { junctionCell } from "@/geo/junction-cell";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { finishUpload } from "./finish-upload";
import { storeRejects } from "./rejects";

const ROWS_PER_STATEMENT = 500;

/** Reads a junctions file: new identifiers are added, known ones updated, none removed. */
export async function ingestJunctions(ctx: Context, upload: { id: string; storageKey: string; mapping: FileMapping }): Promise<void> {
  const read = await readJunctions(await ctx.storage.open(upload.storageKey), upload.mapping);
  if (read.junctions.length === 0) throw new AppError("invalid", "No row of the file could be read as a junction.");
  const rejectsKey = await storeRejects(ctx, upload.id, read.rejectedRows);
  await ctx.db.transaction(async (tx) => {
    const inTransaction = { ...ctx, db: tx };
    const corridorIds = await corridorIdsOf(inTransaction, read.junctions);
    const codes = read.junctions.map((junction) => junction.id);
    const known = new Set<string>();
    for (let i = 0; i < codes.length; i += ROWS_PER_STATEMENT) {
      const rows = await tx.select({ code: junctions.code }).from(junctions).where(inArray(junctions.code, codes.slice(i, i + ROWS_PER_STATEMENT)));
      for (const row of rows) known.add(row.code);
    }
    for (let i = 0; i < read.junctions.length; i += ROWS_PER_STATEMENT) {
      await upsertJunctions(inTransaction, read.junctions.slice(i, i + ROWS_PER_STATEMENT), corridorIds);
    }
    const report: IngestReport = {
      rowsRead: read.rowsRead,
      accepted: read.accepted,
      rejected: read.rejected,
      samples: read.samples,
      remarks: read.remarks,
      created: read.junctions.length - known.size,
      updated: known.size,
    };
    await finishUpload(inTransaction, upload.id, report, rejectsKey);
    await raiseDataVersion(tx);
  });
}

async function corridorIdsOf(ctx: Context, rows: JunctionRow[]): Promise<Map<string, number>> {
  const names = [...new Set(rows.flatMap((row) => (row.corridor === null ? [] : [row.corridor])))];
  if (names.length === 0) return new Map();
  await ctx.db.insert(corridors).values(names.map((name) => ({ name }))).onConflictDoNothing();
  const known = await ctx.db.select({ id: corridors.id, name: corridors.name }).from(corridors).where(inArray(corridors.name, names));
  return new Map(known.map((row) => [row.name, row.id]));
}

async function upsertJunctions(ctx: Context, rows: JunctionRow[], corridorIds: Map<string, number>): Promise<void> {
  await ctx.db
    .insert(junctions)
    .values(
      rows.map((row) => ({
        code: row.id,
        name: row.name,
        lat: row.lat,
        lon: row.lon,
        h3: junctionCell(row.lat, row.lon),
        corridorId: row.corridor === null ? null : (corridorIds.get(row.corridor) ?? null),
        corridorOrder: row.corridorOrder === null ? null : Math.round(row.corridorOrder),
        district: row.district,
        cycleS: row.cycleS === null ? null : Math.round(row.cycleS),
        lastRetimed: row.lastRetimed,
        notes: row.notes,
        updatedAt: ctx.now,
      })),
    )
    .onConflictDoUpdate({
      target: junctions.code,
      set: {
        name: sql`excluded.name`,
        lat: sql`excluded.lat`,
        lon: sql`excluded.lon`,
        h3: sql`excluded.h3`,
        corridorId: sql`excluded.corridor_id`,
        corridorOrder: sql`excluded.corridor_order`,
        district: sql`excluded.district`,
        cycleS: sql`excluded.cycle_s`,
        lastRetimed: sql`excluded.last_retimed`,
        notes: sql`excluded.notes`,
        updatedAt: sql`excluded.updated_at`,
      },
    });
}
