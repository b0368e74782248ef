import { createHash, randomUUID } from "node:crypto";
import { Readable } from "node:stream";
import { and, eq, or } from "drizzle-orm";
import { feedBatches, uploads } from "@/db/schema";
import type { Db } from "@/db/client";
import { AppError } from "@/domain/errors";
import { COLLECT_S, type FeedReceipt } from "@/domain/feed";
import { REJECT_SENTENCES, type RejectReason } from "@/domain/upload";
import { pingRows, WRITTEN_PINGS } from "@/formats/pings/write-pings";
import type { RowCounts } from "@/formats/row-tally";
import { VehicleNames } from "@/formats/vehicle-names";
import { ingestUpload } from "@/jobs/definitions/ingest-upload";
import type { Context } from "../context";
import { orNoRoom } from "../no-room";
import { getSettings } from "../settings/get-settings";
import { openFeed, type Feed } from "./feed-token";
import { readBatch, unpackBatch } from "./read-batch";

export interface ReceiveBatch {
  /** What the supplier's machine shows, as in "Bearer <token>". */
  authorization: string | null;
  idempotencyKey: string | null;
}

const HOUR_MS = 3_600_000;
const MAX_KEY_CHARS = 200;

/**
 * Takes a batch of pings from a supplier's machine. Its rows are judged at once, so that the answer says what is wrong
 * with them; they are read in a few minutes later, together with what came before.
 */
export async function receiveBatch(ctx: Context, input: ReceiveBatch, content: AsyncIterable<Uint8Array>): Promise<FeedReceipt> {
  const token = /^Bearer +(\S+)$/i.exec(input.authorization ?? "")?.[1] ?? null;
  const feed = await openFeed(ctx.db, token, ctx.now);
  const key = input.idempotencyKey;
  if (key !== null && (key === "" || key.length > MAX_KEY_CHARS)) throw new AppError("invalid", `An idempotency key has 1 to ${MAX_KEY_CHARS} characters.`);
  const bytes = await unpackBatch(content);
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const known = await knownReceipt(ctx.db, feed, sha256, key);
  if (known) return known;

  const names = new VehicleNames();
  const { counts, batches } = await readBatch(bytes, names);
  if (counts.accepted === 0) return receiptOf(counts, null);
  const id = randomUUID();
  const storageKey = `feed/${id}.csv`;
  const rows = batches.map((batch) => Buffer.from(pingRows(batch, names)));
  await ctx.storage.put(storageKey, Readable.from(rows)).catch((error: unknown) => {
    throw orNoRoom(error);
  });
  const receipt = receiptOf(counts, id);
  const isNew = await keep(ctx, feed, { id, sha256, idempotencyKey: key, storageKey, receipt }).catch(async (error: unknown) => {
    await ctx.storage.remove(storageKey);
    throw error;
  });
  if (isNew) return receipt;
  // The same batch was sent twice at the same time, and the other one was quicker.
  await ctx.storage.remove(storageKey);
  return (await knownReceipt(ctx.db, feed, sha256, key)) ?? receipt;
}

async function knownReceipt(db: Db, feed: Feed, sha256: string, key: string | null): Promise<FeedReceipt | null> {
  const isSame = key === null ? eq(feedBatches.sha256, sha256) : or(eq(feedBatches.sha256, sha256), eq(feedBatches.idempotencyKey, key));
  const rows = await db
    .select({ sha256: feedBatches.sha256, receipt: feedBatches.receipt })
    .from(feedBatches)
    .where(and(eq(feedBatches.supplierId, feed.supplierId), isSame))
    .limit(2);
  if (rows.length === 0) return null;
  const same = rows.find((row) => row.sha256 === sha256);
  if (!same) throw new AppError("conflict", "Another batch came with this idempotency key before. Give every batch a key of its own.");
  return { ...same.receipt, repeated: true };
}

type Kept = Pick<typeof feedBatches.$inferInsert, "id" | "sha256" | "idempotencyKey" | "receipt"> & { storageKey: string };

/** False where the batch is there already. */
async function keep(ctx: Context, { supplierId }: Feed, batch: Kept): Promise<boolean> {
  const { timeZone } = await getSettings(ctx);
  return ctx.db.transaction(async (tx) => {
    const uploadId = await uploadOfHour(tx, supplierId, ctx.now, timeZone);
    const added = await tx
      .insert(feedBatches)
      .values({ ...batch, supplierId, uploadId, receivedAt: ctx.now })
      .onConflictDoNothing()
      .returning({ id: feedBatches.id });
    if (added.length === 0) return false;
    // After the insert, whose reference locks the upload's row: a job that is taken up now waits for this commit.
    await ctx.queue.enqueue(ingestUpload, { uploadId }, { db: tx, afterS: COLLECT_S });
    return true;
  });
}

async function uploadOfHour(db: Db, supplierId: number, now: Date, timeZone: string): Promise<string> {
  const feedHour = new Date(Math.floor(now.getTime() / HOUR_MS) * HOUR_MS);
  const id = randomUUID();
  const words = new Intl.DateTimeFormat("sv-SE", { timeZone, dateStyle: "short", timeStyle: "short" }).format(feedHour);
  await db
    .insert(uploads)
    .values({ id, kind: "pings", fileName: `Feed ${words}`, storageKey: `uploads/${id}`, bytes: 0, sha256: "", supplierId, mapping: WRITTEN_PINGS, feedHour, state: "waiting", createdAt: now })
    .onConflictDoNothing();
  const [row] = await db
    .select({ id: uploads.id })
    .from(uploads)
    .where(and(eq(uploads.supplierId, supplierId), eq(uploads.feedHour, feedHour)));
  return row.id;
}

function receiptOf(counts: RowCounts, batch: string | null): FeedReceipt {
  const reasons = (Object.entries(counts.rejected) as [RejectReason, number][]).map(([reason, rows]) => ({ reason, rows, explanation: REJECT_SENTENCES[reason] }));
  return { batch, accepted: counts.accepted, rejected: counts.rowsRead - counts.accepted, repeated: false, reasons, samples: counts.samples };
}
