import { integer, pgTable, primaryKey, uuid } from "drizzle-orm/pg-core";
import { bytea } from "../columns";
import { junctions } from "./junctions";
import { uploads } from "./uploads";

/** A sample of the pings near each junction, for looking at derived legs; nothing in it names a vehicle or a time. */
export const pingClouds = pgTable(
  "ping_clouds",
  {
    junctionId: integer("junction_id").notNull().references(() => junctions.id, { onDelete: "cascade" }),
    uploadId: uuid("upload_id").notNull().references(() => uploads.id, { onDelete: "cascade" }),
    payload: bytea("payload").notNull(),
  },
  (t) => [primaryKey({ columns: [t.junctionId, t.uploadId] })],
);
