import { bigint, date, index, integer, pgTable, real, smallint, uuid } from "drizzle-orm/pg-core";
import { bytea, instant } from "../columns";

/**
 * Partitioned by local day; a hand-written part of the first migration turns it into a partitioned table,
 * and the ingest creates a day's partition before it loads into it.
 */
export const traversals = pgTable(
  "traversals",
  {
    localDay: date("local_day").notNull(),
    uploadId: uuid("upload_id").notNull(),
    legId: integer("leg_id").notNull(),
    movementId: integer("movement_id").notNull(),
    /** Keyed hash of the supplier's vehicle identifier. */
    vehicle: bigint("vehicle", { mode: "bigint" }).notNull(),
    enterAt: instant("enter_at").notNull(),
    stopLineAt: instant("stop_line_at").notNull(),
    exitAt: instant("exit_at").notNull(),
    delayS: real("delay_s").notNull(),
    stops: smallint("stops").notNull(),
    stoppedS: real("stopped_s").notNull(),
    farthestStopM: real("farthest_stop_m"),
    flags: smallint("flags").notNull(),
    methodVersion: smallint("method_version").notNull(),
    /** Times and distances along the leg, as the core's track codec writes them. */
    track: bytea("track").notNull(),
  },
  (t) => [index("traversals_leg_idx").on(t.legId, t.stopLineAt), index("traversals_upload_idx").on(t.uploadId)],
);
