import { date, doublePrecision, index, integer, pgTable, serial, text, uniqueIndex } from "drizzle-orm/pg-core";
import { instant } from "../columns";

export const corridors = pgTable(
  "corridors",
  { id: serial("id").primaryKey(), name: text("name").notNull() },
  (t) => [uniqueIndex("corridors_name_key").on(t.name)],
);

export const junctions = pgTable(
  "junctions",
  {
    id: serial("id").primaryKey(),
    /** The city's own identifier. */
    code: text("code").notNull(),
    name: text("name").notNull(),
    lat: doublePrecision("lat").notNull(),
    lon: doublePrecision("lon").notNull(),
    /** H3 cell at resolution 11. */
    h3: text("h3").notNull(),
    corridorId: integer("corridor_id").references(() => corridors.id),
    corridorOrder: integer("corridor_order"),
    district: text("district"),
    cycleS: integer("cycle_s"),
    lastRetimed: date("last_retimed"),
    notes: text("notes"),
    updatedAt: instant("updated_at").notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex("junctions_code_key").on(t.code),
    index("junctions_corridor_idx").on(t.corridorId, t.corridorOrder),
    index("junctions_h3_idx").on(t.h3),
  ],
);
