import { inArray, sql, type SQL } from "drizzle-orm";
import { withAdvisoryLock } from "@/db/bulk-transaction";
import { corridors, junctions } from "@/db/schema";
import { AppError } from "@/domain/errors";
import type { FileMapping, IngestReport, JunctionField } from "@/domain/upload";
import { readJunctions, type JunctionRow, type JunctionsRead } from "@/formats/junctions/read-junctions";
import { junctionCell } from "@/geo/junction-cell";
import { raiseDataVersion } from "../catalogue/catalogue";
import type { Context } from "../context";
import { finishUpload } from "./finish-upload";
import { keepStreetsInPlace, type MovedJunction, type Place } from "./move-junctions";
import { INGEST_LOCK } from "./network-rows";
import { storeRejects } from "./rejects";

const ROWS_PER_STATEMENT = 500;

interface JunctionsUpload {
  id: string;
  storageKey: string;
  mapping: FileMapping;
}

/** Reads a junctions file: new identifiers are added, known ones updated, none removed. */
export async function ingestJunctions(ctx: Context, upload: JunctionsUpload): Promise<void> {
  const read = await readJunctions(await ctx.storage.open(upload.storageKey), upload.mapping);
  if (read.junctions.length === 0) throw new AppError("invalid", "No row of the file could be read as a junction.");
  const rejectsKey = await storeRejects(ctx, upload.id, read.rejectedRows);
  // Not while pings are matched to where the junctions stood before.
  await withAdvisoryLock(ctx.db, INGEST_LOCK, () => storeJunctions(ctx, upload, read, rejectsKey));
}

async function storeJunctions(ctx: Context, upload: JunctionsUpload, read: JunctionsRead, rejectsKey: string | null): Promise<void> {
  await ctx.db.transaction(async (tx) => {
    const inTransaction = { ...ctx, db: tx };
    const corridorIds = await corridorIdsOf(inTransaction, read.junctions);
    const known = await knownPlaces(inTransaction, read.junctions);
    for (let i = 0; i < read.junctions.length; i += ROWS_PER_STATEMENT) {
      await upsertJunctions(inTransaction, read.junctions.slice(i, i + ROWS_PER_STATEMENT), corridorIds, upload.mapping);
    }
    await keepStreetsInPlace(tx, movedOf(read.junctions, known));
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

async function knownPlaces(ctx: Context, rows: readonly JunctionRow[]): Promise<Map<string, Place & { id: number }>> {
  const known = new Map<string, Place & { id: number }>();
  for (let i = 0; i < rows.length; i += ROWS_PER_STATEMENT) {
    const codes = rows.slice(i, i + ROWS_PER_STATEMENT).map((row) => row.id);
    const found = await ctx.db
      .select({ code: junctions.code, id: junctions.id, lat: junctions.lat, lon: junctions.lon })
      .from(junctions)
      .where(inArray(junctions.code, codes));
    for (const { code, ...place } of found) known.set(code, place);
  }
  return known;
}

function movedOf(rows: readonly JunctionRow[], known: ReadonlyMap<string, Place & { id: number }>): MovedJunction[] {
  return rows.flatMap(({ id: code, lat, lon }) => {
    const before = known.get(code);
    return before && (before.lat !== lat || before.lon !== lon) ? [{ id: before.id, from: before, to: { lat, lon } }] : [];
  });
}

async function corridorIdsOf(ctx: Context, rows: JunctionRow[]): Promise<Map<string, number>> {
  const names = [...new Set(rows.flatMap((row) => (row.corridor === null ? [] : [row.corridor])))];
  if (names.length === 0) return new Map();
  await ctx.db.insert(corridors).values(names.map((name) => ({ name }))).onConflictDoNothing();
  const known = await ctx.db.select({ id: corridors.id, name: corridors.name }).from(corridors).where(inArray(corridors.name, names));
  return new Map(known.map((row) => [row.name, row.id]));
}

async function upsertJunctions(ctx: Context, rows: JunctionRow[], corridorIds: Map<string, number>, { columns }: FileMapping): Promise<void> {
  // What a file has no column for stays as it was.
  const ifNamed = (field: JunctionField, set: Record<string, SQL>) => (columns[field] === undefined ? {} : set);
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
        ...ifNamed("corridor", { corridorId: sql`excluded.corridor_id` }),
        ...ifNamed("corridor_order", { corridorOrder: sql`excluded.corridor_order` }),
        ...ifNamed("district", { district: sql`excluded.district` }),
        ...ifNamed("cycle_s", { cycleS: sql`excluded.cycle_s` }),
        ...ifNamed("last_retimed", { lastRetimed: sql`excluded.last_retimed` }),
        ...ifNamed("notes", { notes: sql`excluded.notes` }),
        updatedAt: sql`excluded.updated_at`,
      },
    });
}
