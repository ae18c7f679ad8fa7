// @vitest-environment jsdom
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { cleanup, configure, render, screen } from "@testing-library/react";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { JobTicket } from "@/components/shell/job-ticket";

vi.mock("next/navigation", () => ({ usePathname: () => "/projects/p1/board" }));

const PROGRESS = { received: 108, analysed: 108, failed: 0, total: 108, sorted: true };
const STATUS = { frames: 108, tiles: 17, openQuestions: 3, rows: 3, columns: 6 };

// A loaded machine takes its time; what is waited for comes or the test fails.
configure({ asyncUtilTimeout: 20_000 });

beforeEach(() => {
  // jsdom has no event streams; nothing arrives on this one.
  vi.stubGlobal("EventSource", class { addEventListener() {} close() {} }); // prettier-ignore
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

function show(answer: (url: string) => Response): void {
  vi.stubGlobal("fetch", async (url: string) => answer(url));
  const client = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  render(
    <QueryClientProvider client={client}>
      <JobTicket projectId="p1" progress={PROGRESS} status={STATUS} />
    </QueryClientProvider>,
  );
}

test("each stub leads to its view, and the present one is marked", () => {
  show((url) => Response.json(url.endsWith("/progress") ? PROGRESS : STATUS));
  const links = screen.getAllByRole("link");
  expect(links.map((link) => link.getAttribute("href"))).toEqual([
    "/projects/p1/intake",
    "/projects/p1/board",
    "/projects/p1/handover",
  ]);
  expect(links.map((link) => link.getAttribute("aria-current"))).toEqual([null, "page", null]);
  expect(links.map((link) => link.textContent)).toEqual([
    "1Bring in108 frames",
    "2Board17 tiles, 3 questions",
    "3Hand overready, 3 open",
  ]);
});

test("a newer count replaces the one the server rendered", async () => {
  show((url) => Response.json(url.endsWith("/progress") ? PROGRESS : { ...STATUS, openQuestions: 1 }));
  await screen.findByText("1 question");
  expect(screen.getAllByRole("link")[1]?.textContent).toBe("2Board17 tiles, 1 question");
});

test("a session that ended is said, with the way back to this page", async () => {
  const body = { title: "Unauthorized", status: 401, detail: "Sign in first.", code: "unauthenticated" };
  show(() => Response.json(body, { status: 401 }));
  const link = await screen.findByRole("link", { name: "Sign in again in a new tab" });
  expect(link.getAttribute("href")).toBe("/sign-in?ended=1&to=%2Fprojects%2Fp1%2Fboard");
});
