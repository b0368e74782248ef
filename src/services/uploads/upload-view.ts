import { desc, eq, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { suppliers, uploads, users } from "@/db/schema";
import type { UploadView } from "@/domain/upload";

const COLUMNS = {
  id: uploads.id,
  kind: uploads.kind,
  fileName: uploads.fileName,
  bytes: uploads.bytes,
  state: uploads.state,
  supplier: suppliers.name,
  progress: uploads.progress,
  report: uploads.report,
  failure: uploads.failure,
  hasRejects: sql<boolean>`${uploads.rejectsKey} is not null`,
  by: users.name,
  createdAt: uploads.createdAt,
  finishedAt: uploads.finishedAt,
};

export async function readUploads(db: Db, by: { id?: string }, limit: number): Promise<UploadView[]> {
  const rows = await db
    .select(COLUMNS)
    .from(uploads)
    .leftJoin(suppliers, eq(suppliers.id, uploads.supplierId))
    .leftJoin(users, eq(users.id, uploads.createdBy))
    .where(by.id === undefined ? undefined : eq(uploads.id, by.id))
    // Files of one instant in the order in which they came.
    .orderBy(desc(uploads.createdAt), desc(uploads.receivedNo))
    .limit(limit);
  return rows.map((row) => ({
    ...row,
    createdAt: row.createdAt.toISOString(),
    finishedAt: row.finishedAt?.toISOString() ?? null,
  }));
}
