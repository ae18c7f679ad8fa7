import { index, integer, primaryKey, real, sqliteTable, text, uniqueIndex } from "drizzle-orm/sqlite-core";
import { stacks } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import { sessions, users } from "@/db/schema/accounts";
import type { Change } from "@/lib/board/changes";
import type { ProjectId, SessionId, StackId, UserId } from "@/lib/ids";
import type { ProposedQuestion, QuestionKind } from "@/lib/sorting/types";

export const seams = sqliteTable(
  "seams",
  {
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    stackId: text("stack_id")
      .$type<StackId>()
      .notNull()
      .references(() => stacks.id, { onDelete: "cascade" }),
    neighbourId: text("neighbour_id")
      .$type<StackId>()
      .notNull()
      .references(() => stacks.id, { onDelete: "cascade" }),
    side: text({ enum: ["right", "below"] }).notNull(),
    /** Fraction of the tile's side; null: could not be measured. */
    overlap: real(),
  },
  (table) => [
    primaryKey({ columns: [table.stackId, table.neighbourId] }),
    index("seams_by_project").on(table.projectId),
  ],
);

export const questions = sqliteTable(
  "questions",
  {
    id: text().primaryKey(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    /** The same doubt has the same key in every sorting. */
    key: text().notNull(),
    kind: text().$type<QuestionKind>().notNull(),
    message: text().notNull(),
    evidence: text().notNull(),
    frameIds: text("frame_ids", { mode: "json" }).$type<readonly string[]>().notNull(),
    stackIds: text("stack_ids", { mode: "json" }).$type<readonly string[]>().notNull(),
    tile: text(),
    answers: text({ mode: "json" }).$type<ProposedQuestion["answers"]>().notNull(),
    severity: real().notNull(),
    settledAtMs: integer("settled_at_ms"),
    settledBy: text("settled_by")
      .$type<UserId>()
      .references(() => users.id, { onDelete: "set null" }),
  },
  (table) => [uniqueIndex("questions_key").on(table.projectId, table.key)],
);

/** Who did what, when: one row a revision. */
export const changes = sqliteTable(
  "changes",
  {
    /** The client's UUID for a command, ours for a proposal: the same id twice is applied once. */
    id: text().primaryKey(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    revision: integer().notNull(),
    /** Null: the computation. */
    userId: text("user_id")
      .$type<UserId>()
      .references(() => users.id, { onDelete: "set null" }),
    type: text().notNull(),
    /** The command as it was sent, or what a sorting came to. */
    payload: text({ mode: "json" }).$type<Readonly<Record<string, unknown>>>().notNull(),
    /** What it did, with what was there before: from these the step is shown to others and taken back. */
    steps: text({ mode: "json" }).$type<readonly Change[]>().notNull().default([]),
    /** What was done, in plain words without the person's name: "moved HARB0019 from A3 to A4". */
    sentence: text().notNull().default(""),
    /** Names, then, of the tiles it touched. */
    tiles: text({ mode: "json" }).$type<readonly string[]>().notNull().default([]),
    /** The change that this one takes back. */
    undoes: text(),
    atMs: integer("at_ms").notNull(),
  },
  (table) => [
    uniqueIndex("changes_revision").on(table.projectId, table.revision),
    index("changes_by_person").on(table.projectId, table.userId, table.revision),
  ],
);

/** What happened, for the pages that are open: ids and versions, not data. */
export const events = sqliteTable(
  "events",
  {
    id: integer().primaryKey({ autoIncrement: true }),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    type: text().notNull(),
    payload: text({ mode: "json" }).$type<Readonly<Record<string, unknown>>>().notNull(),
    atMs: integer("at_ms").notNull(),
  },
  (table) => [index("events_by_project").on(table.projectId, table.id)],
);

/** Who has the board open, and on which tile: one row a session, touched while the page is open. */
export const presences = sqliteTable(
  "presences",
  {
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    sessionId: text("session_id")
      .$type<SessionId>()
      .notNull()
      .references(() => sessions.id, { onDelete: "cascade" }),
    userId: text("user_id")
      .$type<UserId>()
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    /** Name of the tile; null: none is open. */
    tile: text(),
    seenAtMs: integer("seen_at_ms").notNull(),
  },
  (table) => [primaryKey({ columns: [table.projectId, table.sessionId] })],
);
