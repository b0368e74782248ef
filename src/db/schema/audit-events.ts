import { bigserial, index, jsonb, pgTable, text, uuid } from "drizzle-orm/pg-core";
import { instant } from "../columns";

export const auditEvents = pgTable(
  "audit_events",
  {
    id: bigserial("id", { mode: "number" }).primaryKey(),
    at: instant("at").notNull(),
    /** Null for the worker. */
    userId: uuid("user_id"),
    actor: text("actor").notNull(),
    action: text("action").notNull(),
    subject: text("subject").notNull(),
    detail: jsonb("detail").$type<Record<string, unknown>>().notNull(),
  },
  (t) => [index("audit_events_at_idx").on(t.at)],
);
