import { integer, sqliteTable, text } from "drizzle-orm/sqlite-core";
import type { FileId, UploadId } from "@/lib/ids";

/**
 * Stored files of a deleted project, written in the transaction that deletes its rows: only what stands here is ever
 * taken off the disk, so that a database restored from a backup never costs an original that it does not know.
 */
export const removals = sqliteTable("removals", {
  id: integer().primaryKey({ autoIncrement: true }),
  uploadIds: text("upload_ids", { mode: "json" }).$type<readonly UploadId[]>().notNull(),
  fileIds: text("file_ids", { mode: "json" }).$type<readonly FileId[]>().notNull(),
  createdAtMs: integer("created_at_ms").notNull(),
});
