import { index, integer, primaryKey, real, sqliteTable, text } from "drizzle-orm/sqlite-core";
import { users } from "@/db/schema/accounts";
import type { ProjectId, UserId } from "@/lib/ids";
import type { ShotOrder } from "@/lib/sorting/types";

export const projects = sqliteTable("projects", {
  id: text().$type<ProjectId>().primaryKey(),
  name: text().notNull(),
  /** Raised by every change of the board: command or proposal. */
  revision: integer().notNull().default(0),
  /** Fraction of the tile's side. */
  overlapWanted: real("overlap_wanted").notNull(),
  framesLeast: integer("frames_least").notNull(),
  framesMost: integer("frames_most").notNull(),
  /** Given by a person, seconds; null: found by the computation. */
  longestPauseSeconds: real("longest_pause_seconds"),
  expectedRows: integer("expected_rows"),
  expectedColumns: integer("expected_columns"),
  /** The grid as it is: the smallest rectangle from A1 that holds every stack, plus lines a person added. */
  rows: integer().notNull().default(0),
  columns: integer().notNull().default(0),
  shotOrder: text("shot_order", { mode: "json" }).$type<ShotOrder | null>(),
  /** The time limit that the last sorting used, seconds. */
  usedPauseSeconds: real("used_pause_seconds"),
  /** Raised whenever a file is analysed, fails or goes; the proposal covers everything where both are equal. */
  contentVersion: integer("content_version").notNull().default(0),
  sortedVersion: integer("sorted_version").notNull().default(0),
  sortedAtMs: integer("sorted_at_ms"),
  /** Somebody asked for a sorting that keeps only what people decided: the next one lets go of its own earlier results. */
  isAnewWanted: integer("is_anew_wanted", { mode: "boolean" }).notNull().default(false),
  /** Why the last sorting failed, in plain words; null: it did not. */
  sortError: text("sort_error"),
  isDemo: integer("is_demo", { mode: "boolean" }).notNull().default(false),
  archivedAtMs: integer("archived_at_ms"),
  createdAtMs: integer("created_at_ms").notNull(),
});

export const members = sqliteTable(
  "members",
  {
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    userId: text("user_id")
      .$type<UserId>()
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    role: text({ enum: ["lead", "editor", "viewer"] }).notNull(),
    joinedAtMs: integer("joined_at_ms").notNull(),
  },
  (table) => [primaryKey({ columns: [table.projectId, table.userId] }), index("members_by_user").on(table.userId)],
);
