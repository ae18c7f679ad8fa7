import { expect, test } from "vitest";
import "../support/people";
import { useDatabase } from "../support/database";
import { POST } from "@/app/api/auth/[...nextauth]/route";

useDatabase();

const context = () => ({ params: Promise.resolve({ nextauth: ["callback", "credentials"] }) });
const headers = { "content-type": "application/x-www-form-urlencoded" };

test("nobody makes the server read more than a sign-in needs", async () => {
  let sentBytes = 0;
  const endless = new ReadableStream<Uint8Array>({
    pull: (controller) => {
      sentBytes += 4096;
      controller.enqueue(new Uint8Array(4096).fill(0x78));
    },
  });
  const init = { method: "POST", headers, body: endless, duplex: "half" };
  const answer = await POST(
    new Request("http://yard.example/api/auth/callback/credentials", init as RequestInit),
    context(),
  );
  expect([answer.status, await answer.json()]).toMatchObject([413, { code: "too_large" }]);
  expect(sentBytes).toBeLessThan(64 * 1024);
});

test("another site's page cannot sign anybody in or out", async () => {
  const init = { method: "POST", headers: { ...headers, origin: "https://elsewhere.example" }, body: "email=a" };
  const answer = await POST(new Request("http://yard.example/api/auth/signout", init), context());
  expect(answer.status).toBe(403);
});
