import { z } from "zod";

/** A call that the server refused or that never arrived. `detail` is written to be shown. */
export class FetchProblem extends Error {
  constructor(
    /** HTTP status; 0: no answer (offline, server down). */
    readonly status: number,
    readonly code: string,
    readonly detail: string,
    /** The problem body's other members. */
    readonly body: Readonly<Record<string, unknown>> = {},
    options?: { cause?: unknown },
  ) {
    super(detail, options);
    this.name = "FetchProblem";
  }
}

const problemSchema = z.looseObject({ code: z.string(), detail: z.string() });

/**
 * Browser side of every JSON call: sends, checks the status, validates the answer.
 * @throws FetchProblem with the words of the problem body (RFC 9457), or status 0 where nothing answered, or the
 *   connection broke before the answer was in; ZodError where a good answer is not what was expected
 */
export async function fetchJson<Answer>(
  url: string,
  schema: z.ZodType<Answer>,
  init: RequestInit = {},
): Promise<Answer> {
  const { status, isOk, text } = await send(url, init);
  const body = parseJson(text);
  if (isOk) return schema.parse(body);
  const problem = problemSchema.safeParse(body);
  if (problem.success) throw new FetchProblem(status, problem.data.code, problem.data.detail, problem.data);
  throw new FetchProblem(status, "unexpected", `The server answered ${status}. Try again.`);
}

async function send(url: string, init: RequestInit): Promise<{ status: number; isOk: boolean; text: string }> {
  try {
    const response = await fetch(url, { ...init, headers: { accept: "application/json", ...init.headers } });
    // Half an answer is none: whoever sent a command must send it again, and not take it for refused.
    return { status: response.status, isOk: response.ok, text: await response.text() };
  } catch (cause) {
    if (cause instanceof DOMException && cause.name === "AbortError") throw cause;
    throw new FetchProblem(
      0,
      "offline",
      "No answer from the server. Check the connection and try again.",
      {},
      { cause },
    );
  }
}

/** Null where it is none: a page of a proxy, or no body. */
function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
