import { index, integer, pgTable, serial, text, uuid } from "drizzle-orm/pg-core";
import { instant } from "../columns";
import { uploads } from "./uploads";

/**
 * Pieces of work of files that several workers read in together. A worker that does one holds its row locked, so
 * nobody else takes it, and a worker that dies lets go of it. What goes in and what comes out lies in the storage.
 */
export const ingestPieces = pgTable(
  "ingest_pieces",
  {
    id: serial("id").primaryKey(),
    /** One reading of one file. */
    run: uuid("run").notNull(),
    uploadId: uuid("upload_id").notNull().references(() => uploads.id, { onDelete: "cascade" }),
    /** Kind of work. */
    kind: text("kind").notNull(),
    /** Name of the object that lists the inputs of all pieces of a phase, and the place in it. */
    inputs: text("inputs").notNull(),
    number: integer("number").notNull(),
    doneAt: instant("done_at"),
  },
  (t) => [index("ingest_pieces_run_idx").on(t.run, t.id)],
);
