import { createHash } from "node:crypto";
import { and, asc, eq, gte, inArray, isNotNull, lt, notExists, or } from "drizzle-orm";
import { alias } from "drizzle-orm/pg-core";
import type { Db } from "@/db/client";
import { feedBatches, uploads } from "@/db/schema";
import type { Context } from "../context";

/** Read along from the hour before, so that trips over the full hour are whole: longer than any wait at a signal. */
const EARLIER_MS = 30 * 60_000;
/** Batches of older hours are kept in the file of their hour alone. */
const KEEP_MS = 2 * 3_600_000;

export interface FeedHour {
  uploadId: string;
  storageKey: string;
  supplierId: number;
  feedHour: Date;
}

/** All batches of an hour and the last of the hour before; null where nothing has come since the hour was read in. */
export async function batchesToRead(ctx: Context, hour: FeedHour): Promise<StoredBatch[] | null> {
  const batches = await batchesOf(ctx.db, hour);
  return batches.some((batch) => batch.uploadId === hour.uploadId && !batch.isIn) ? batches : null;
}

/** Writes the batches into the upload's file. */
export async function writeHour(ctx: Context, hour: FeedHour, batches: readonly StoredBatch[]): Promise<void> {
  const hash = createHash("sha256");
  async function* joined(): AsyncGenerator<Uint8Array> {
    for (const { storageKey } of batches) {
      for await (const chunk of await ctx.storage.open(storageKey)) {
        hash.update(chunk as Uint8Array);
        yield chunk as Uint8Array;
      }
    }
  }
  const bytes = await ctx.storage.put(hour.storageKey, joined());
  await ctx.db.update(uploads).set({ bytes, sha256: hash.digest("hex") }).where(eq(uploads.id, hour.uploadId));
}

export interface StoredBatch {
  id: string;
  uploadId: string;
  storageKey: string;
  isIn: boolean;
}

async function batchesOf(db: Db, { uploadId, supplierId, feedHour }: FeedHour): Promise<StoredBatch[]> {
  return db.transaction(async (tx) => {
    // Waits for those who are adding a batch to this upload: they counted on this look to find it.
    await tx.select({ id: uploads.id }).from(uploads).where(eq(uploads.id, uploadId)).for("update");
    const isEarlier = and(
      eq(feedBatches.supplierId, supplierId),
      gte(feedBatches.receivedAt, new Date(feedHour.getTime() - EARLIER_MS)),
      lt(feedBatches.receivedAt, feedHour),
    );
    const rows = await tx
      .select({ id: feedBatches.id, uploadId: feedBatches.uploadId, storageKey: feedBatches.storageKey, isIn: feedBatches.isIn })
      .from(feedBatches)
      .where(and(or(eq(feedBatches.uploadId, uploadId), isEarlier), isNotNull(feedBatches.storageKey)))
      .orderBy(asc(feedBatches.receivedAt), asc(feedBatches.id));
    return rows as StoredBatch[];
  });
}

/** The batches are part of the stored result; those of hours long past are dropped, since their hour's file holds them. */
export async function settleHour(ctx: Context, hour: FeedHour, batches: readonly StoredBatch[]): Promise<void> {
  const own = batches.filter((batch) => batch.uploadId === hour.uploadId).map((batch) => batch.id);
  await ctx.db.update(feedBatches).set({ isIn: true }).where(inArray(feedBatches.id, own));
  const other = alias(feedBatches, "other");
  const old = await ctx.db
    .select({ id: feedBatches.id, storageKey: feedBatches.storageKey })
    .from(feedBatches)
    .innerJoin(uploads, eq(uploads.id, feedBatches.uploadId))
    .where(
      and(
        eq(feedBatches.supplierId, hour.supplierId),
        lt(uploads.feedHour, new Date(hour.feedHour.getTime() - KEEP_MS)),
        isNotNull(feedBatches.storageKey),
        notExists(ctx.db.select({ id: other.id }).from(other).where(and(eq(other.uploadId, uploads.id), eq(other.isIn, false)))),
      ),
    )
    .limit(1000);
  if (old.length === 0) return;
  await ctx.db.update(feedBatches).set({ storageKey: null }).where(inArray(feedBatches.id, old.map((batch) => batch.id)));
  for (const { storageKey } of old) if (storageKey !== null) await ctx.storage.remove(storageKey);
}
