import { bigint, index, integer, jsonb, pgTable, serial, text, uniqueIndex, uuid } from "drizzle-orm/pg-core";
import type { FileMapping, IngestProgress, IngestReport } from "@/domain/upload";
import { UPLOAD_KINDS, UPLOAD_STATES } from "@/domain/upload";
import { bytea, instant } from "../columns";
import { users } from "./users";

export const suppliers = pgTable(
  "suppliers",
  {
    id: serial("id").primaryKey(),
    name: text("name").notNull(),
    /** The last mapping that worked for this supplier, by kind of file. */
    mappings: jsonb("mappings").$type<Partial<Record<string, FileMapping>>>().notNull(),
  },
  (t) => [uniqueIndex("suppliers_name_key").on(t.name)],
);

export const uploads = pgTable(
  "uploads",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    kind: text("kind", { enum: UPLOAD_KINDS }).notNull(),
    fileName: text("file_name").notNull(),
    storageKey: text("storage_key").notNull(),
    bytes: bigint("bytes", { mode: "number" }).notNull(),
    sha256: text("sha256").notNull(),
    supplierId: integer("supplier_id").references(() => suppliers.id),
    mapping: jsonb("mapping").$type<FileMapping>(),
    /** Of a supplier's feed: begin of the hour whose batches it gathers. */
    feedHour: instant("feed_hour"),
    state: text("state", { enum: UPLOAD_STATES }).notNull(),
    progress: jsonb("progress").$type<IngestProgress>(),
    report: jsonb("report").$type<IngestReport>(),
    /** Storage key of the rejected rows, as CSV. */
    rejectsKey: text("rejects_key"),
    /** Sentence for the person when state is failed. */
    failure: text("failure"),
    createdBy: uuid("created_by").references(() => users.id, { onDelete: "set null" }),
    createdAt: instant("created_at").notNull(),
    /** Order of receipt where the instant is the same: ids are random. */
    receivedNo: serial("received_no").notNull(),
    finishedAt: instant("finished_at"),
  },
  (t) => [index("uploads_created_idx").on(t.createdAt), index("uploads_sha256_idx").on(t.sha256), uniqueIndex("uploads_feed_key").on(t.supplierId, t.feedHour)],
);

/** The screen summary of one local day from one upload: days are read by merging their slices. */
export const screenDays = pgTable(
  "screen_days",
  {
    id: serial("id").primaryKey(),
    uploadId: uuid("upload_id").notNull().references(() => uploads.id, { onDelete: "cascade" }),
    /** Days since 1970-01-01 of the local calendar day. */
    day: integer("day").notNull(),
    methodVersion: integer("method_version").notNull(),
    medianIntervalS: integer("median_interval_s"),
    traversals: integer("traversals").notNull(),
    payload: bytea("payload").notNull(),
  },
  (t) => [uniqueIndex("screen_days_upload_day_key").on(t.uploadId, t.day), index("screen_days_day_idx").on(t.day)],
);
