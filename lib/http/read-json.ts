import type { z } from "zod";
import { AppError } from "@/lib/errors/app-error";

/** Largest JSON body that is read: the longest command (6 000 frames of 36 characters, and where each was) is three quarters. */
const MAX_BODY_BYTES = 1024 * 1024;

/** Of what is wrong, so many are told, each so long: names in a body are its sender's, and may be any number. */
const TOLD_MOST = 20;
const TOLD_CHARACTERS = 200;

/**
 * Reads and validates a JSON body.
 * @throws AppError unsupported_media_type unless application/json, too_large, or invalid naming each field
 */
export async function readJson<Body>(request: Request, schema: z.ZodType<Body>): Promise<Body> {
  const type = request.headers.get("content-type")?.split(";")[0]?.trim().toLowerCase();
  if (type !== "application/json") {
    throw new AppError("unsupported_media_type", "Send this as application/json.");
  }
  const parsed = schema.safeParse(parse(await readText(request, MAX_BODY_BYTES)));
  if (parsed.success) return parsed.data;
  const fields = parsed.error.issues.slice(0, TOLD_MOST).map((issue) => ({
    field: issue.path.join(".").slice(0, TOLD_CHARACTERS),
    message: issue.message.slice(0, TOLD_CHARACTERS),
  }));
  const sentence = fields.map(({ field, message }) => (field ? `${field}: ${message}` : message)).join("; ");
  throw new AppError("invalid", sentence, { fields });
}

/**
 * Reads a body as text, and no further than it may be long.
 * @throws AppError too_large
 */
export async function readText(request: Request, mostBytes: number): Promise<string> {
  const reader = request.body?.getReader();
  if (!reader) return "";
  const chunks: Uint8Array[] = [];
  let bytes = 0;
  for (;;) {
    const { done, value } = await reader.read();
    if (done) return Buffer.concat(chunks).toString("utf8");
    bytes += value.byteLength;
    if (bytes > mostBytes) {
      await reader.cancel();
      throw new AppError("too_large", `This is more than one call may carry (${mostBytes} bytes). Send it in parts.`);
    }
    chunks.push(value);
  }
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch (cause) {
    throw new AppError("invalid", "The body is not valid JSON.", { cause });
  }
}
