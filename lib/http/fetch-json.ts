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
 * @throws FetchProblem with the words of the problem body (RFC 9457), or status 0 where nothing answered
 */
export async function fetchJson<Answer>(
  url: string,
  schema: z.ZodType<Answer>,
  init: RequestInit = {},
): Promise<Answer> {
  const response = await send(url, init);
  const body: unknown = await response.json().catch(() => null);
  if (response.ok) return schema.parse(body);
  const problem = problemSchema.safeParse(body);
  if (problem.success) {
    throw new FetchProblem(response.status, problem.data.code, problem.data.detail, problem.data);
  }
  throw new FetchProblem(response.status, "unexpected", `The server answered ${response.status}. Try again.`);
}

async function send(url: string, init: RequestInit): Promise<Response> {
  try {
    return await fetch(url, { ...init, headers: { accept: "application/json", ...init.headers } });
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
