import { afterEach, expect, test, vi } from "vitest";
import { z } from "zod";
import { FetchProblem, fetchJson } from "@/lib/http/fetch-json";

afterEach(() => vi.unstubAllGlobals());

const schema = z.object({ revision: z.number() });

function answering(body: BodyInit | null, status: number): Promise<{ revision: number }> {
  vi.stubGlobal("fetch", () => Promise.resolve(new Response(body, { status })));
  return fetchJson("/api/projects/p/commands", schema);
}

/** A body that breaks off as when the connection goes (Fetch Standard: the body's stream errors; from memory). */
function broken(): ReadableStream<Uint8Array> {
  let isBegun = false;
  return new ReadableStream({
    pull(controller) {
      if (isBegun) return controller.error(new TypeError("network error"));
      isBegun = true;
      controller.enqueue(new TextEncoder().encode('{"revision":'));
    },
  });
}

test("a good answer is validated and given", async () => {
  expect(await answering('{"revision":7}', 200)).toEqual({ revision: 7 });
});

test("an answer that breaks off on the way is none: the call may be sent again", async () => {
  await expect(answering(broken(), 200)).rejects.toMatchObject({ status: 0, code: "offline" });
});

test("a refusal keeps the server's words, and whatever else it says", async () => {
  const body = JSON.stringify({ code: "conflict", detail: "It has been moved since.", subjectId: "frame-1" });
  const problem = await answering(body, 409).catch((error: unknown) => error);
  expect(problem).toBeInstanceOf(FetchProblem);
  expect(problem).toMatchObject({ status: 409, code: "conflict", detail: "It has been moved since." });
  expect(problem).toMatchObject({ body: { subjectId: "frame-1" } });
});

test("a proxy's page instead of a problem is said with its status", async () => {
  await expect(answering("<html>", 502)).rejects.toMatchObject({ status: 502, code: "unexpected" });
});

test("a call that was taken back says so, and not that nothing answered", async () => {
  vi.stubGlobal("fetch", () => Promise.reject(new DOMException("gone", "AbortError")));
  await expect(fetchJson("/api", schema)).rejects.toMatchObject({ name: "AbortError" });
});
