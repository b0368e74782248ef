import { jsonb, pgTable, text } from "drizzle-orm/pg-core";
import { instant } from "../columns";

/** One row for each group of settings; the value is parsed with its schema on reading. */
export const settings = pgTable("settings", {
  key: text("key").primaryKey(),
  value: jsonb("value").notNull(),
  updatedAt: instant("updated_at").notNull().defaultNow(),
});
