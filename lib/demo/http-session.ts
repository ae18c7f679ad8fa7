import { z } from "zod";

/** A signed-in person's way to the running product, as a script has it: an address and a cookie. */
export interface HttpSession {
  /** No trailing slash. */
  readonly address: string;
  readonly cookie: string;
}

/**
 * Signs in as any script does (interfaces.md: csrf, then credentials).
 * @throws Error where the product refuses
 */
export async function signIn(address: string, account: { email: string; password: string }): Promise<HttpSession> {
  const csrf = await fetch(`${address}/api/auth/csrf`);
  const { csrfToken } = z.object({ csrfToken: z.string() }).parse(await csrf.json());
  const answer = await fetch(`${address}/api/auth/callback/credentials`, {
    method: "POST",
    headers: { cookie: cookiesOf(csrf) },
    body: new URLSearchParams({ csrfToken, email: account.email, password: account.password, json: "true" }),
    redirect: "manual",
  });
  const cookie = cookiesOf(answer);
  if (!cookie.includes("session-token=")) {
    throw new Error(`signing in as ${account.email} was refused (${answer.status})`);
  }
  return { address, cookie };
}

/**
 * One JSON call.
 * @throws Error with the product's own words where it answers with a failure
 */
export async function callJson<Answer>(
  { address, cookie }: HttpSession,
  path: string,
  options: { schema: z.ZodType<Answer>; body?: unknown },
): Promise<Answer> {
  const response = await fetch(`${address}${path}`, {
    method: options.body === undefined ? "GET" : "POST",
    headers: { cookie, ...(options.body !== undefined && { "content-type": "application/json" }) },
    body: options.body === undefined ? undefined : JSON.stringify(options.body),
  });
  const text = await response.text();
  if (!response.ok) throw new Error(`${path} answered ${response.status}: ${text}`);
  return options.schema.parse(JSON.parse(text));
}

function cookiesOf(response: Response): string {
  return response.headers
    .getSetCookie()
    .map((cookie) => cookie.split(";")[0])
    .join("; ");
}
