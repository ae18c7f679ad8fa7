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

/** A new random identifier (UUID version 4, RFC 9562: 122 random bits), to be parsed by the schema of its kind. */
export function newId(): string {
  // Browsers have `randomUUID` only where the connection is secure; a yard in a local network may not be.
  if ("randomUUID" in crypto) return crypto.randomUUID();
  const bytes = (crypto as Crypto).getRandomValues(new Uint8Array(16));
  const hex = Array.from(bytes, (byte, at) => {
    if (at === 6) return (byte & 0x0f) | 0x40;
    return at === 8 ? (byte & 0x3f) | 0x80 : byte;
  }).map((byte) => byte.toString(16).padStart(2, "0"));
  return [hex.slice(0, 4), hex.slice(4, 6), hex.slice(6, 8), hex.slice(8, 10), hex.slice(10)]
    .map((part) => part.join(""))
    .join("-");
}
