// @vitest-environment jsdom
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { cleanup, render, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { Board } from "@/components/board/board";
import type { Board as BoardData } from "@/lib/board/model";
import { makeBoard, makeEventfulBoard } from "@/tests/support/make-board";

vi.mock("next/navigation", () => ({
  usePathname: () => "/projects/project-1/board",
  useSearchParams: () => new URLSearchParams(),
}));

const EMPTY = makeBoard({ rows: 0, columns: 0, framesPerTile: 0 });
const IDLE = { received: 108, analysed: 108, failed: 0, total: 108, sorted: true };

beforeEach(() => {
  vi.stubGlobal("matchMedia", () => ({ matches: false, addEventListener() {}, removeEventListener() {} }));
  vi.stubGlobal(
    "ResizeObserver",
    class {
      observe() {}
      unobserve() {}
      disconnect() {}
    },
  );
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

interface Answers {
  board?: BoardData;
  progress: object;
  sortError?: string;
}

/** Opens the page on a server that gives these answers; without a board it fails. What is returned may be changed. */
function open(answers: Answers, canEdit = true): Answers {
  vi.stubGlobal("fetch", async (url: string) => {
    if (url.endsWith("/progress")) return Response.json(answers.progress);
    if (url.endsWith("/files")) return Response.json({ files: [], uploads: [], sortError: answers.sortError ?? null });
    if (answers.board) return Response.json(answers.board);
    return Response.json({ code: "unexpected", detail: "Something went wrong here." }, { status: 500 });
  });
  const client = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  render(
    <QueryClientProvider client={client}>
      <Board projectId="project-1" userId="user-1" canEdit={canEdit} />
    </QueryClientProvider>,
  );
  return answers;
}

test("with nothing brought in it says what to do, a viewer whom to wait for", async () => {
  const nothing = { received: 0, analysed: 0, failed: 0, total: 0, sorted: false };
  open({ board: EMPTY, progress: nothing });
  expect((await screen.findByRole("link", { name: "Bring in frames" })).getAttribute("href")).toBe(
    "/projects/project-1/intake",
  );
  cleanup();
  open({ board: EMPTY, progress: nothing }, false);
  await screen.findByText(/As a viewer you will see the board/);
  expect(screen.queryByRole("link", { name: "Bring in frames" })).toBeNull();
});

test("while frames are measured it says how many", async () => {
  open({ board: EMPTY, progress: { received: 80, analysed: 41, failed: 1, total: 108, sorted: false } });
  const status = await screen.findByRole("status");
  expect([...status.children].map((line) => line.textContent)).toEqual([
    "42 of 80 files measured",
    "28 files still on the way",
  ]);
  expect(screen.getByRole("progressbar", { name: "Files measured" }).getAttribute("aria-valuenow")).toBe("42");
});

test("while more frames are on the way the board is shown as it is, and what could not be read is said", async () => {
  open({
    board: makeEventfulBoard(),
    progress: { received: 120, analysed: 111, failed: 3, total: 140, sorted: false },
  });
  expect((await screen.findByText(/files measured/)).textContent).toBe(
    "114 of 140 files measured; the board shows what is sorted so far",
  );
  expect(screen.getByRole("link", { name: "3 files could not be read" }).getAttribute("href")).toBe(
    "/projects/project-1/intake",
  );
  expect(screen.getAllByRole("rowheader")).toHaveLength(18);
});

test("a sorting that failed is told in plain words, and that nothing is lost", async () => {
  open({ board: EMPTY, progress: { ...IDLE, sorted: false }, sortError: "The sorting ran out of memory." });
  const page = (await screen.findByRole("heading", { name: "The frames could not be sorted" })).parentElement;
  expect(page?.textContent).toContain("The sorting ran out of memory.");
  expect(page?.textContent).toContain("Nothing is lost: every file that came in is stored unchanged.");
});

test("files of which none is a frame lead to the list that says why", async () => {
  open({ board: EMPTY, progress: { received: 2, analysed: 0, failed: 2, total: 2, sorted: true } });
  await screen.findByRole("heading", { name: "No frame among the files" });
  expect(screen.getByRole("link", { name: "See what came in" }).getAttribute("href")).toBe(
    "/projects/project-1/intake",
  );
});

test("a board that could not be fetched is tried again on request", async () => {
  const answers = open({ progress: IDLE });
  expect((await screen.findByRole("alert")).textContent).toBe("Something went wrong here.");
  answers.board = makeEventfulBoard();
  await userEvent.click(screen.getByRole("button", { name: "Try again" }));
  expect(await screen.findAllByRole("rowheader")).toHaveLength(18);
  expect(screen.queryByRole("alert")).toBeNull();
});
