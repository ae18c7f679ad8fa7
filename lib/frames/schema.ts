import { z } from "zod";
import { fileIdSchema, frameIdSchema, projectIdSchema, uploadIdSchema } from "@/lib/ids";

/** `GET /api/projects/{id}/progress`. Counts are files; analysed + failed <= received <= total. */
export const progressSchema = z.object({
  received: z.int(),
  analysed: z.int(),
  failed: z.int(),
  total: z.int(),
  sorted: z.boolean(),
});
export type Progress = z.infer<typeof progressSchema>;

export const FILE_STATES = ["received", "analysed", "failed", "duplicate"] as const;

/** One file that came in, as the intake lists it. */
export const intakeFileSchema = z.object({
  id: fileIdSchema,
  name: z.string(),
  folder: z.string().nullable(),
  bytes: z.number(),
  lastModifiedMs: z.number().nullable(),
  /** Of the stored file; null until the worker has read it. */
  sha256: z.string().nullable(),
  /** received: waits for the worker. failed: `reason` says why. duplicate: same bytes as `duplicateOf`. */
  state: z.enum(FILE_STATES),
  /** Plain words: why it was refused, or what is to be known about it (a raw file alone); null: all is well. */
  reason: z.string().nullable(),
  duplicateOf: z.object({ id: fileIdSchema, name: z.string(), folder: z.string().nullable() }).nullable(),
  isRaw: z.boolean(),
  frameId: frameIdSchema.nullable(),
  receivedAtMs: z.number(),
});
export type IntakeFile = z.infer<typeof intakeFileSchema>;

/** An upload whose last byte is not in yet. Only who began it can go on with it (same file, `url`) or cancel it. */
export const unfinishedUploadSchema = z.object({
  id: uploadIdSchema,
  /** tus address, for `tus.Upload`'s `uploadUrl`. */
  url: z.string(),
  name: z.string(),
  folder: z.string().nullable(),
  lastModifiedMs: z.number().nullable(),
  bytes: z.number(),
  receivedBytes: z.number(),
  isMine: z.boolean(),
  createdAtMs: z.number(),
});
export type UnfinishedUpload = z.infer<typeof unfinishedUploadSchema>;

/** `GET /api/projects/{id}/files`: newest first. */
export const intakeListSchema = z.object({
  files: z.array(intakeFileSchema),
  uploads: z.array(unfinishedUploadSchema),
  /** Why the last sorting failed, in plain words; null: it did not. */
  sortError: z.string().nullable(),
});
export type IntakeList = z.infer<typeof intakeListSchema>;

/** Longest side of a crop, px: what half of a large, dense screen shows at 100 %. */
export const CROP_MOST_PX = 2048;

/** Query of `.../frames/{frameId}/crop`: a rectangle in the frame's upright full-size pixels. */
export const cropQuerySchema = z.object({
  x: z.coerce.number().int().min(0),
  y: z.coerce.number().int().min(0),
  w: z.coerce.number().int().min(1).max(CROP_MOST_PX),
  h: z.coerce.number().int().min(1).max(CROP_MOST_PX),
});
export type CropQuery = z.infer<typeof cropQuerySchema>;

export const projectParamsSchema = z.object({ projectId: projectIdSchema });
export const frameParamsSchema = z.object({ projectId: projectIdSchema, frameId: frameIdSchema });
export const fileParamsSchema = z.object({ projectId: projectIdSchema, fileId: fileIdSchema });
