import { index, integer, sqliteTable, text } from "drizzle-orm/sqlite-core";
import { projects } from "@/db/schema/projects";
import type { ProjectId } from "@/lib/ids";

/** What the worker has to do. A handler may run twice: its writes are safe to repeat. */
export const jobs = sqliteTable(
  "jobs",
  {
    id: text().primaryKey(),
    /** Unique: asking twice for the same work is one job. */
    key: text().notNull().unique(),
    kind: text({ enum: ["analyse-file", "sort-project", "measure-stacks"] }).notNull(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    payload: text({ mode: "json" }).$type<Readonly<Record<string, unknown>>>().notNull(),
    state: text({ enum: ["waiting", "running", "done", "failed"] }).notNull(),
    attempts: integer().notNull().default(0),
    runAfterMs: integer("run_after_ms").notNull(),
    /** Only who holds the token may finish the job; the lease runs out when its holder dies. */
    leaseToken: text("lease_token"),
    leaseUntilMs: integer("lease_until_ms"),
    error: text(),
    createdAtMs: integer("created_at_ms").notNull(),
    finishedAtMs: integer("finished_at_ms"),
  },
  (table) => [
    index("jobs_to_claim").on(table.state, table.runAfterMs),
    index("jobs_by_project").on(table.projectId, table.state),
  ],
);

/** One row a worker process, touched every few seconds: health reads it. */
export const workers = sqliteTable("workers", {
  id: text().primaryKey(),
  startedAtMs: integer("started_at_ms").notNull(),
  seenAtMs: integer("seen_at_ms").notNull(),
});
