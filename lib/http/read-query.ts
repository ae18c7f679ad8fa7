import type { z } from "zod";
import { AppError } from "@/lib/errors/app-error";

/**
 * Reads and validates the query of an address.
 * @throws AppError invalid naming each field
 */
export function readQuery<Query>(request: Request, schema: z.ZodType<Query>): Query {
  const parsed = schema.safeParse(Object.fromEntries(new URL(request.url).searchParams));
  if (parsed.success) return parsed.data;
  const fields = parsed.error.issues.map((issue) => ({ field: issue.path.join("."), message: issue.message }));
  throw new AppError("invalid", fields.map(({ field, message }) => `${field}: ${message}`).join("; "), { fields });
}
