import { index, integer, real, sqliteTable, text, uniqueIndex } from "drizzle-orm/sqlite-core";
import { projects } from "@/db/schema/projects";
import { users } from "@/db/schema/accounts";
import type { FileId, FrameId, ProjectId, StackId, UploadId, UserId } from "@/lib/ids";
import type { CaptureMetadata } from "@/lib/metadata/types";
import type { FrameMeasurements } from "@/lib/analysis/types";

/** One upload by the tus protocol. Its bytes lie under its id from the first on: nothing is moved or rewritten. */
export const uploads = sqliteTable(
  "uploads",
  {
    id: text().$type<UploadId>().primaryKey(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    userId: text("user_id")
      .$type<UserId>()
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    name: text().notNull(),
    folder: text(),
    lastModifiedMs: integer("last_modified_ms"),
    lengthBytes: integer("length_bytes").notNull(),
    /** The `Upload-Metadata` header as it was sent: HEAD gives it back. */
    metadataHeader: text("metadata_header").notNull(),
    createdAtMs: integer("created_at_ms").notNull(),
    /** Last byte in and recorded. */
    finishedAtMs: integer("finished_at_ms"),
    cancelledAtMs: integer("cancelled_at_ms"),
  },
  (table) => [index("uploads_by_project").on(table.projectId, table.finishedAtMs)],
);

export const stacks = sqliteTable(
  "stacks",
  {
    id: text().$type<StackId>().primaryKey(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    /** Row, column and take together are unique; row and column are null where the stack has no place yet. */
    row: integer(),
    column: integer(),
    take: integer().notNull(),
    isChosenTake: integer("is_chosen_take", { mode: "boolean" }).notNull(),
    referenceId: text("reference_id").$type<FrameId>(),
    isSettled: integer("is_settled", { mode: "boolean" }).notNull().default(false),
    shareUserId: text("share_user_id")
      .$type<UserId>()
      .references(() => users.id, { onDelete: "set null" }),
    placedBy: text("placed_by", { enum: ["computation", "person"] }).notNull(),
    confidence: real().notNull(),
    reason: text().notNull(),
    positionXPx: real("position_x_px"),
    positionYPx: real("position_y_px"),
    spotX: real("spot_x").notNull(),
    spotY: real("spot_y").notNull(),
  },
  (table) => [
    index("stacks_by_project").on(table.projectId),
    uniqueIndex("stacks_place").on(table.projectId, table.row, table.column, table.take),
  ],
);

export const frames = sqliteTable(
  "frames",
  {
    id: text().$type<FrameId>().primaryKey(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    /** Null until the measured file is analysed. */
    metadata: text({ mode: "json" }).$type<CaptureMetadata | null>(),
    measurements: text({ mode: "json" }).$type<FrameMeasurements | null>(),
    /** Null until sorted. */
    orderTaken: integer("order_taken"),
    stackId: text("stack_id")
      .$type<StackId>()
      .references(() => stacks.id, { onDelete: "set null" }),
    setAside: text("set_aside", { enum: ["soft", "moved", "exposure", "stray", "by hand"] }),
    relativeSharpness: real("relative_sharpness"),
    shiftXPx: real("shift_x_px"),
    shiftYPx: real("shift_y_px"),
    pauseBeforeSeconds: real("pause_before_seconds"),
    placedBy: text("placed_by", { enum: ["computation", "person"] })
      .notNull()
      .default("computation"),
    confidence: real().notNull().default(0),
    reason: text().notNull().default(""),
    createdAtMs: integer("created_at_ms").notNull(),
  },
  (table) => [
    index("frames_by_project").on(table.projectId, table.orderTaken),
    index("frames_by_stack").on(table.stackId),
  ],
);

/** One stored original. */
export const files = sqliteTable(
  "files",
  {
    id: text().$type<FileId>().primaryKey(),
    projectId: text("project_id")
      .$type<ProjectId>()
      .notNull()
      .references(() => projects.id, { onDelete: "cascade" }),
    /** Null where it belongs to no frame: unreadable, duplicate, a raw file alone. */
    frameId: text("frame_id")
      .$type<FrameId>()
      .references(() => frames.id, { onDelete: "set null" }),
    /** The original's name under `originals/` in the storage. */
    uploadId: text("upload_id")
      .$type<UploadId>()
      .notNull()
      .unique()
      .references(() => uploads.id, { onDelete: "cascade" }),
    name: text().notNull(),
    folder: text(),
    /** Folder and stem: a raw file belongs to the picture of the same key. */
    pairingKey: text("pairing_key").notNull(),
    lastModifiedMs: integer("last_modified_ms"),
    bytes: integer().notNull(),
    sha256: text(),
    mediaType: text("media_type"),
    /** received: waits for the worker; analysed: measured, or a raw file hashed; failed: see reason; duplicate: see duplicateOf. */
    state: text({ enum: ["received", "analysed", "failed", "duplicate"] }).notNull(),
    isRaw: integer("is_raw", { mode: "boolean" }).notNull(),
    /** Why it could not be read, in plain words. */
    reason: text(),
    duplicateOf: text("duplicate_of").$type<FileId>(),
    receivedAtMs: integer("received_at_ms").notNull(),
  },
  (table) => [
    index("files_by_project").on(table.projectId, table.state),
    index("files_by_frame").on(table.frameId),
    index("files_by_pairing_key").on(table.projectId, table.pairingKey),
    index("files_by_sha256").on(table.projectId, table.sha256),
  ],
);
