import { z } from "zod";

/** Identifiers are opaque strings; brands keep them from being swapped. Parsed at every edge, made only here. */
const idSchema = z.string().regex(/^[A-Za-z0-9_-]{1,64}$/, "not an identifier");

export const projectIdSchema = idSchema.brand<"ProjectId">();
export const userIdSchema = idSchema.brand<"UserId">();
export const frameIdSchema = idSchema.brand<"FrameId">();
export const fileIdSchema = idSchema.brand<"FileId">();
export const stackIdSchema = idSchema.brand<"StackId">();
export const uploadIdSchema = idSchema.brand<"UploadId">();
export const sessionIdSchema = idSchema.brand<"SessionId">();

export type ProjectId = z.infer<typeof projectIdSchema>;
export type UserId = z.infer<typeof userIdSchema>;
export type FrameId = z.infer<typeof frameIdSchema>;
export type FileId = z.infer<typeof fileIdSchema>;
export type StackId = z.infer<typeof stackIdSchema>;
export type UploadId = z.infer<typeof uploadIdSchema>;
export type SessionId = z.infer<typeof sessionIdSchema>;

/** A new random identifier (UUID, 122 random bits), to be parsed by the schema of its kind. */
export function newId(): string {
  return crypto.randomUUID();
}
