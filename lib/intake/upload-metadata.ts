import { z } from "zod";
import { AppError, type FieldError } from "@/lib/errors/app-error";
import { type ProjectId, projectIdSchema } from "@/lib/ids";

/** What `Upload-Metadata` says of a file. Recorded as it came; never part of a path on the server. */
export interface UploadFacts {
  readonly projectId: ProjectId;
  readonly name: string;
  /** "/" between names; null at the root of what was dropped. */
  readonly folder: string | null;
  readonly lastModifiedMs: number | null;
}

/** File systems in use allow 255 bytes or UTF-16 units a name; beyond that it is somebody's own invention. */
const NAME_MOST_CHARACTERS = 1024;
/** Linux's PATH_MAX. */
const FOLDER_MOST_CHARACTERS = 4096;
/** ECMA-262, 21.4.1.1: a Date reaches this far from 1970 on either side, ms. */
const TIME_MOST_MS = 8.64e15;

const nameSchema = z
  .string({ error: "is missing" })
  .min(1, "is empty")
  .max(NAME_MOST_CHARACTERS, `is longer than ${NAME_MOST_CHARACTERS} characters`)
  .refine((name) => !name.includes("\0"), "contains a NUL character")
  .refine((name) => !name.includes("/"), 'contains "/": send the folders in `folder`')
  .refine((name) => name !== "." && name !== "..", "is not a file name");

const folderSchema = z
  .string()
  .max(FOLDER_MOST_CHARACTERS, `is longer than ${FOLDER_MOST_CHARACTERS} characters`)
  .refine((folder) => !folder.includes("\0"), "contains a NUL character")
  .transform((folder) => folder.split("/").filter((part) => part !== "" && part !== "."))
  .refine((parts) => !parts.includes(".."), 'contains "..": send the folder relative to what was dropped')
  .transform((parts) => (parts.length > 0 ? parts.join("/") : null));

const lastModifiedSchema = z
  .string()
  .transform((text) => (text === "" ? null : Math.trunc(Number(text))))
  .refine((ms) => ms === null || Math.abs(ms) <= TIME_MOST_MS, "is not a time in milliseconds");

const metadataSchema = z.object({
  projectId: projectIdSchema,
  filename: nameSchema,
  folder: folderSchema.optional(),
  lastModified: lastModifiedSchema.optional(),
});

/**
 * Reads tus's `Upload-Metadata` (tus 1.0.0, Creation: comma-separated `key base64`, keys unique).
 * @throws AppError invalid naming each field that is missing or not usable
 */
export function parseUploadMetadata(header: string | null): UploadFacts {
  const parsed = metadataSchema.safeParse(decode(header ?? ""));
  if (!parsed.success) {
    throw refusal(parsed.error.issues.map(({ path, message }) => ({ field: path.join("."), message })));
  }
  const { projectId, filename, folder, lastModified } = parsed.data;
  return { projectId, name: filename, folder: folder ?? null, lastModifiedMs: lastModified ?? null };
}

function decode(header: string): Record<string, string> {
  const values = new Map<string, string>();
  for (const pair of header.split(",").map((part) => part.trim())) {
    if (pair === "") continue;
    const [key = "", value = ""] = pair.split(/ +/);
    if (values.has(key)) throw refusal([{ field: key, message: "is given twice" }]);
    values.set(key, decodeBase64(key, value));
  }
  return Object.fromEntries(values);
}

function decodeBase64(field: string, value: string): string {
  if (!/^[A-Za-z0-9+/]*={0,2}$/.test(value)) throw refusal([{ field, message: "is not base64" }]);
  try {
    // A byte order mark is part of the name.
    return new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(Buffer.from(value, "base64"));
  } catch {
    throw refusal([{ field, message: "is not UTF-8" }]);
  }
}

function refusal(fields: readonly FieldError[]): AppError {
  const sentences = fields.map(({ field, message }) => `${field} ${message}`).join("; ");
  return new AppError("invalid", `Upload-Metadata: ${sentences}. projectId and filename are required.`, { fields });
}
