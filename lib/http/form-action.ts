import "server-only";
import { headers } from "next/headers";
import { redirect, unstable_rethrow } from "next/navigation";
import type { z } from "zod";
import { signInAddress } from "@/lib/auth/page-gate";
import { AppError, type FieldError } from "@/lib/errors/app-error";
import type { FormState } from "@/lib/http/form-state";
import { checkOrigin } from "@/lib/http/route";

/** Fields whose text is never sent back to the page. */
const SECRET = new Set(["password", "current", "next"]);

/**
 * Runs a form's server action: origin check, expected failures as the form's own words, no session leads to sign-in,
 * the rest logged once.
 * @param run what the form does; the sentence it returns says that it is done
 */
export async function runForm(form: FormData, run: () => Promise<string | null>): Promise<FormState> {
  const values = typedValues(form);
  try {
    checkOrigin(await headers());
    return { status: "done", message: await run(), fields: {}, values };
  } catch (error) {
    unstable_rethrow(error);
    if (!(error instanceof AppError)) return unexpected(error, values);
    if (error.code === "unauthenticated") redirect(await signInAddress());
    const fields = byField(error.fields);
    return { status: "refused", message: Object.keys(fields).length > 0 ? null : error.message, fields, values };
  }
}

/**
 * Validates what a form sent.
 * @throws AppError invalid, naming each field by its first path segment unless `fieldOf` says otherwise
 */
export function parseForm<Value>(
  schema: z.ZodType<Value>,
  input: unknown,
  fieldOf: (path: readonly PropertyKey[]) => string = (path) => String(path[0] ?? ""),
): Value {
  const parsed = schema.safeParse(input);
  if (parsed.success) return parsed.data;
  const fields = parsed.error.issues.map((issue) => ({
    field: fieldOf(issue.path),
    message: asSentence(issue.message),
  }));
  throw new AppError("invalid", "Something in this form is not right yet.", { fields });
}

/** The text of a field; absent and files count as empty. */
export function textOf(form: FormData, field: string): string {
  const value = form.get(field);
  return typeof value === "string" ? value : "";
}

/** The number in a field, with either decimal sign; NaN where there is none, so that its schema refuses it. */
export function numberOf(form: FormData, field: string): number {
  const text = textOf(form, field).trim().replace(",", ".");
  return text === "" ? Number.NaN : Number(text);
}

function typedValues(form: FormData): Record<string, string> {
  const entries = [...form.entries()].filter(
    (entry): entry is [string, string] =>
      typeof entry[1] === "string" && !SECRET.has(entry[0]) && !entry[0].startsWith("$"),
  );
  return Object.fromEntries(entries);
}

/** The first complaint about each field: one at a time is read, a list is not. */
function byField(errors: readonly FieldError[]): Record<string, string> {
  const fields: Record<string, string> = {};
  for (const { field, message } of errors) fields[field] ??= message;
  return fields;
}

function asSentence(text: string): string {
  const capital = text.charAt(0).toUpperCase() + text.slice(1);
  return /[.!?]$/.test(capital) ? capital : `${capital}.`;
}

function unexpected(error: unknown, values: Record<string, string>): FormState {
  const requestId = crypto.randomUUID();
  console.error(`form ${requestId} failed`, error);
  const message = `Something went wrong here and nothing was changed. Try again; if it stays, tell the administrator this number: ${requestId}.`;
  return { status: "refused", message, fields: {}, values };
}
