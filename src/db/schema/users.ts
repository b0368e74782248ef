import { index, integer, pgTable, text, uniqueIndex, uuid } from "drizzle-orm/pg-core";
import { sql } from "drizzle-orm";
import { ROLES } from "@/domain/actor";
import { instant } from "../columns";

export const users = pgTable(
  "users",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    email: text("email").notNull(),
    name: text("name").notNull(),
    role: text("role", { enum: ROLES }).notNull(),
    /** Null until the invitation is taken up. */
    passwordHash: text("password_hash"),
    /** Sessions issued before this moment are void: a new password and a disabled account raise it. */
    sessionsValidFrom: instant("sessions_valid_from").notNull().defaultNow(),
    disabledAt: instant("disabled_at"),
    createdAt: instant("created_at").notNull().defaultNow(),
  },
  (t) => [uniqueIndex("users_email_key").on(sql`lower(${t.email})`)],
);

/** Invitations and password resets: only the hash of the token is kept. */
export const passwordTokens = pgTable(
  "password_tokens",
  {
    tokenHash: text("token_hash").primaryKey(),
    userId: uuid("user_id").notNull().references(() => users.id, { onDelete: "cascade" }),
    purpose: text("purpose", { enum: ["invitation", "reset"] }).notNull(),
    expiresAt: instant("expires_at").notNull(),
    usedAt: instant("used_at"),
  },
  (t) => [index("password_tokens_user_idx").on(t.userId)],
);

/** Failed sign-ins by account and by address within the current window. */
export const signInAttempts = pgTable("sign_in_attempts", {
  /** `account:<e-mail>`, `address:<ip>`, `pair:<e-mail> <ip>` or `reset:<ip>` */
  key: text("key").primaryKey(),
  failures: integer("failures").notNull(),
  windowStart: instant("window_start").notNull(),
});
