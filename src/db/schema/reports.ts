import { index, jsonb, pgTable, text, uuid } from "drizzle-orm/pg-core";
import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { instant } from "../columns";
import { users } from "./users";

/** A hotspot report is a frozen screen: what the council read stays what it was. */
export const hotspotReports = pgTable(
  "hotspot_reports",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    title: text("title").notNull(),
    query: jsonb("query").$type<ScreenQuery>().notNull(),
    result: jsonb("result").$type<ScreenResult>().notNull(),
    publishedBy: uuid("published_by").references(() => users.id, { onDelete: "set null" }),
    publishedAt: instant("published_at").notNull(),
  },
  (t) => [index("hotspot_reports_published_idx").on(t.publishedAt)],
);
