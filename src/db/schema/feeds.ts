import { index, integer, jsonb, pgTable, text, uniqueIndex, uuid, boolean } from "drizzle-orm/pg-core";
import type { FeedReceipt } from "@/domain/feed";
import { instant } from "../columns";
import { suppliers, uploads } from "./uploads";
import { users } from "./users";

/** What a supplier's machine shows with every batch; only the hash of the token is kept. */
export const feedTokens = pgTable(
  "feed_tokens",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    tokenHash: text("token_hash").notNull(),
    supplierId: integer("supplier_id").notNull().references(() => suppliers.id),
    createdBy: uuid("created_by").references(() => users.id, { onDelete: "set null" }),
    createdAt: instant("created_at").notNull(),
    lastUsedAt: instant("last_used_at"),
    revokedAt: instant("revoked_at"),
    /** Batches sent since `minuteStart`. */
    minuteBatches: integer("minute_batches").notNull().default(0),
    minuteStart: instant("minute_start"),
  },
  (t) => [uniqueIndex("feed_tokens_hash_key").on(t.tokenHash)],
);

/** One batch that a supplier sent; those of one hour make up one upload. */
export const feedBatches = pgTable(
  "feed_batches",
  {
    id: uuid("id").primaryKey(),
    supplierId: integer("supplier_id").notNull().references(() => suppliers.id),
    uploadId: uuid("upload_id").notNull().references(() => uploads.id, { onDelete: "cascade" }),
    /** Of the bytes as they came, unpacked. */
    sha256: text("sha256").notNull(),
    idempotencyKey: text("idempotency_key"),
    /** Accepted rows; null once they are kept in the hour's file alone. */
    storageKey: text("storage_key"),
    receipt: jsonb("receipt").$type<FeedReceipt>().notNull(),
    /** Its pings are part of the stored result. */
    isIn: boolean("is_in").notNull().default(false),
    receivedAt: instant("received_at").notNull(),
  },
  (t) => [
    uniqueIndex("feed_batches_sha256_key").on(t.supplierId, t.sha256),
    uniqueIndex("feed_batches_idempotency_key").on(t.supplierId, t.idempotencyKey),
    index("feed_batches_upload_idx").on(t.uploadId),
    index("feed_batches_received_idx").on(t.supplierId, t.receivedAt),
  ],
);
