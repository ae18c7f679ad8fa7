import { redirect } from "next/navigation";
import { expect, test, vi } from "vitest";
import { z } from "zod";
import { AppError } from "@/lib/errors/app-error";
import { checkOrigin, route } from "@/lib/http/route";
import { projectIdSchema } from "@/lib/ids";

const paramsSchema = z.object({ projectId: projectIdSchema });
const call = (handler: () => Promise<Response>, params: object = { projectId: "p1" }, init: RequestInit = {}) =>
  route(paramsSchema, handler)(new Request("http://yard.example/", init), { params: Promise.resolve(params) });

// interfaces.md: Origin, if sent, must be APP_URL's or the request's own Host; without it, allowed unless
// Sec-Fetch-Site says cross-site. APP_URL is http://127.0.0.1:3000 here.
test.each<Record<string, string>>([
  {},
  { origin: "http://127.0.0.1:3000" },
  { origin: "http://yard:8080", host: "yard:8080" },
  { "sec-fetch-site": "same-origin" },
  { "sec-fetch-site": "none" },
  // A proxy may speak HTTPS to the browser: the host is what counts.
  { origin: "https://yard.example", host: "yard.example" },
])("a change with %j is let through", (headers) => {
  expect(() => checkOrigin(new Headers(headers))).not.toThrow();
});

test.each<Record<string, string>>([
  { origin: "https://elsewhere.example", host: "yard.example" },
  { origin: "http://127.0.0.1:3001" },
  { origin: "null", host: "yard.example" },
  { origin: "", host: "yard.example" },
  { "sec-fetch-site": "cross-site" },
])("a change with %j is refused", (headers) => {
  const check = () => checkOrigin(new Headers(headers));
  expect(check).toThrow(expect.objectContaining({ code: "cross_site", status: 403 }));
});

test.each(["POST", "PUT", "PATCH", "DELETE"])("%s from another site does not reach the handler", async (method) => {
  const handler = vi.fn(async () => Response.json({}));
  const answer = await call(handler, undefined, { method, headers: { origin: "https://elsewhere.example" } });
  expect(answer.status).toBe(403);
  expect(handler).not.toHaveBeenCalled();
});

test("a parameter that is no identifier answers 404", async () => {
  expect((await call(async () => Response.json({}), { projectId: "../etc" })).status).toBe(404);
});

test("an expected failure is a problem body (RFC 9457)", async () => {
  const answer = await call(async () => {
    throw new AppError("conflict", "Somebody was faster.", { extra: { present: 7 } });
  });
  expect(answer.status).toBe(409);
  expect(answer.headers.get("content-type")).toBe("application/problem+json");
  expect(await answer.json()).toEqual({
    type: "about:blank",
    title: "Conflict",
    status: 409,
    detail: "Somebody was faster.",
    code: "conflict",
    requestId: expect.any(String),
    present: 7,
  });
});

test("what is not expected is logged once and answered without its detail", async () => {
  const log = vi.spyOn(console, "error").mockImplementation(() => undefined);
  const answer = await call(async () => {
    throw new Error("the secret is 7391");
  });
  expect(answer.status).toBe(500);
  const text = await answer.text();
  expect(text).not.toContain("7391");
  expect(JSON.parse(text)).toMatchObject({ code: "unexpected" });
  expect(log).toHaveBeenCalledOnce();
});

test("Next's own control flow passes through", async () => {
  await expect(
    call(async () => {
      redirect("/sign-in");
    }),
  ).rejects.toMatchObject({ digest: expect.stringContaining("NEXT_REDIRECT") });
});

test("a call that its client gave up is not logged as a failure", async () => {
  const leaving = new AbortController();
  const answer = await call(
    async () => {
      leaving.abort();
      throw new Error("aborted");
    },
    undefined,
    { signal: leaving.signal },
  );
  // tests/support/setup.ts fails a test that logs an error.
  expect(answer.status).toBe(499);
});
