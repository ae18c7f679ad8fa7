import { index, integer, sqliteTable, text } from "drizzle-orm/sqlite-core";
import type { SessionId, UserId } from "@/lib/ids";

/** Times are integer milliseconds UTC throughout. */
export const users = sqliteTable("users", {
  id: text().$type<UserId>().primaryKey(),
  /** As typed, lower case: people sign in with it whatever the case. */
  email: text().notNull().unique(),
  name: text().notNull(),
  /** argon2id, PHC string. */
  passwordHash: text("password_hash").notNull(),
  isAdministrator: integer("is_administrator", { mode: "boolean" }).notNull().default(false),
  isDemo: integer("is_demo", { mode: "boolean" }).notNull().default(false),
  disabledAtMs: integer("disabled_at_ms"),
  createdAtMs: integer("created_at_ms").notNull(),
});

/** One sign-in. The cookie carries the id; the gate looks it up here, so that deleting the row ends it everywhere. */
export const sessions = sqliteTable(
  "sessions",
  {
    id: text().$type<SessionId>().primaryKey(),
    userId: text("user_id")
      .$type<UserId>()
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    /** The browser's own description of itself, cut short, for the account page. */
    device: text().notNull().default(""),
    createdAtMs: integer("created_at_ms").notNull(),
    lastSeenAtMs: integer("last_seen_at_ms").notNull(),
    expiresAtMs: integer("expires_at_ms").notNull(),
  },
  (table) => [index("sessions_by_user").on(table.userId)],
);

/** Failed sign-ins by account and address, for the wait after ten in a quarter of an hour. Successes are not kept. */
export const signInFailures = sqliteTable(
  "sign_in_failures",
  {
    id: integer().primaryKey({ autoIncrement: true }),
    email: text().notNull(),
    address: text().notNull(),
    atMs: integer("at_ms").notNull(),
  },
  (table) => [index("sign_in_failures_by_account").on(table.email, table.address, table.atMs)],
);
