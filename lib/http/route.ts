import "server-only";
import { unstable_rethrow } from "next/navigation";
import type { z } from "zod";
import { environment } from "@/lib/env";
import { AppError } from "@/lib/errors/app-error";
import { problemResponse, unexpectedResponse } from "@/lib/errors/problem";

const CHANGING = new Set(["POST", "PUT", "PATCH", "DELETE"]);

/** Not in a standard; common practice for a request that its client gave up. */
const CLIENT_WENT = 499;

type Handler<Params> = (request: Request, params: Params) => Promise<Response>;

/**
 * Wraps a route handler: origin check, parameters parsed, expected failures as problem bodies, the rest logged once.
 * A parameter that is no identifier answers 404, as an unknown one does.
 */
export function route<Params>(paramsSchema: z.ZodType<Params>, handler: Handler<Params>) {
  return async (request: Request, context: { params: Promise<unknown> }): Promise<Response> => {
    const requestId = crypto.randomUUID();
    try {
      if (CHANGING.has(request.method)) checkOrigin(request.headers);
      // Next gives a route without parameters no object at all.
      const params = paramsSchema.safeParse((await context.params) ?? {});
      if (!params.success) throw new AppError("not_found", "There is nothing at this address.");
      return await handler(request, params.data);
    } catch (error) {
      unstable_rethrow(error);
      if (error instanceof AppError) return problemResponse(error, requestId);
      // Whoever asked went away in the middle: not a failure, and nobody reads the answer.
      if (request.signal.aborted) return new Response(null, { status: CLIENT_WENT });
      console.error(`request ${requestId} failed`, error);
      return unexpectedResponse(requestId);
    }
  };
}

/**
 * Refuses changes that another site's page sends with the person's cookie.
 * `Origin`, if sent, must be APP_URL's or the request's own Host (never Next's request.url, which says localhost);
 * without it, `Sec-Fetch-Site: cross-site` is refused and all else (scripts) allowed.
 * @throws AppError cross_site
 */
export function checkOrigin(headers: Headers): void {
  const origin = headers.get("origin");
  if (origin === null) {
    if (headers.get("sec-fetch-site") === "cross-site") throw crossSite();
    return;
  }
  const sent = URL.canParse(origin) ? new URL(origin) : null;
  const isOurs = sent && (sent.origin === new URL(environment().appUrl).origin || sent.host === headers.get("host"));
  if (!isOurs) throw crossSite();
}

function crossSite(): AppError {
  return new AppError(
    "cross_site",
    "This call came from another site's page and was refused. Open Stackyard itself and try again.",
  );
}
