import { STATUS_CODES } from "node:http";
import type { AppError } from "@/lib/errors/app-error";

const PROBLEM_HEADERS = { "content-type": "application/problem+json", "cache-control": "no-store" };

/** Body and headers of a failure: RFC 9457, with our `code` and `requestId` as extension members. */
export function problemResponse(error: AppError, requestId: string): Response {
  const body = {
    type: "about:blank",
    title: STATUS_CODES[error.status] ?? "Error",
    status: error.status,
    detail: error.message,
    code: error.code,
    requestId,
    ...(error.fields.length > 0 ? { fields: error.fields } : {}),
    ...error.extra,
  };
  return Response.json(body, { status: error.status, headers: PROBLEM_HEADERS });
}

/** What is not expected: no detail for the caller; the log has it under the same request id. */
export function unexpectedResponse(requestId: string): Response {
  const body = {
    type: "about:blank",
    title: "Internal Server Error",
    status: 500,
    detail:
      "Something went wrong here. Nothing that was confirmed is lost. Try again; if it stays, tell the administrator the request id.",
    code: "unexpected",
    requestId,
  };
  return Response.json(body, { status: 500, headers: PROBLEM_HEADERS });
}
