// @vitest-environment jsdom
import { cleanup, render, screen, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { useState } from "react";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { Sheet } from "@/components/board/sheet";
import { indexBoard } from "@/lib/board/board-index";
import type { Board } from "@/lib/board/model";
import type { BoardViewName } from "@/components/board/use-board-place";
import { LocalBoard } from "@/tests/support/local-board";
import { makeBoard, makeEventfulBoard } from "@/tests/support/make-board";

// jsdom lays nothing out: the sheet gets the size of a laptop's window.
class FixedObserver {
  observe() {}
  unobserve() {}
  disconnect() {}
}

beforeEach(() => {
  vi.stubGlobal("ResizeObserver", FixedObserver);
  vi.stubGlobal("CSS", { escape: (text: string) => text });
  Element.prototype.scrollIntoView = () => undefined;
  Element.prototype.scrollTo = () => undefined;
  for (const [name, value] of Object.entries({
    clientWidth: 1200,
    clientHeight: 800,
    offsetWidth: 1200,
    offsetHeight: 800,
  })) {
    vi.spyOn(HTMLElement.prototype, name as "offsetWidth", "get").mockReturnValue(value);
  }
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

function Harness({ board, isWide = true }: { readonly board: Board; readonly isWide?: boolean }) {
  const [chosen, setChosen] = useState<string | null>(null);
  const [view, setView] = useState<BoardViewName>("grid");
  const props = { chosen, onChoose: setChosen, view, onShow: setView, isWide, saved: null };
  return <LocalBoard board={board}>{(now) => <Sheet index={indexBoard(now)} {...props} />}</LocalBoard>;
}

test("a tile says aloud what it holds, and opens its frames below its row", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  const tile = screen.getByRole("button", { name: "Tile A3, 6 of 6 frames in use, 1 question" });
  expect(tile.getAttribute("aria-expanded")).toBe("false");
  await userEvent.click(tile);
  const bench = screen.getByRole("region", { name: "Frames of A3" });
  expect(within(bench).getAllByRole("row")).toHaveLength(6);
  expect(within(bench).getByText("reference")).toBeDefined();
  expect(within(bench).getByText("1/250 s f/8 ISO 100 105 mm")).toBeDefined();
  await userEvent.keyboard("{Escape}");
  expect(screen.queryByRole("region", { name: "Frames of A3" })).toBeNull();
});

test("a bracket on the rail chooses its tile", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  const rail = screen.getByRole("region", { name: "Order taken" });
  await userEvent.click(within(rail).getByRole("button", { name: "A2: 5 of 6 frames in use" }));
  expect(screen.getByRole("region", { name: "Frames of A2" })).toBeDefined();
});

test("a hole says what it costs and what to do", () => {
  render(<Harness board={makeEventfulBoard()} />);
  const hole = screen.getByRole("group", { name: /^B5 is a hole: \d+ % of this tile's area is in no frame$/ });
  expect(within(hole).getByRole("link", { name: "Bring in its frames" }).getAttribute("href")).toBe(
    "/projects/project-1/intake",
  );
});

test("small overlaps are printed on the seams, the others on request", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  expect(screen.getByText("Overlap of C4 and C5: 21 %, small")).toBeDefined();
  expect(screen.queryByText(/^Overlap of A1 and A2/)).toBeNull();
  await userEvent.click(screen.getByRole("checkbox", { name: "All overlaps" }));
  expect(screen.getByText(/^Overlap of A1 and A2: 3\d %$/)).toBeDefined();
  expect(screen.getByText("Overlap of A5 and A6: not measured")).toBeDefined();
});

test("the docket shows one question at a time and turns to the chosen tile's", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  const docket = screen.getByRole("region", { name: "3 open questions" });
  expect(within(docket).getByRole("heading").textContent).toBe("Does HARB0019 belong to A4?");
  await userEvent.click(within(docket).getByRole("button", { name: "Question after" }));
  expect(within(docket).getByRole("heading").textContent).toBe("Are 3 frames enough for C1?");
  await userEvent.click(screen.getByRole("button", { name: /^Tile A3/ }));
  expect(within(docket).getByRole("heading").textContent).toBe("Does HARB0019 belong to A4?");
});

test("a frame is compared with the reference side by side", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  await userEvent.click(screen.getByRole("button", { name: /^Tile A1/ }));
  await userEvent.click(screen.getByRole("button", { name: "Actions for HARB0002" }));
  await userEvent.click(screen.getByRole("menuitem", { name: "Compare with the reference" }));
  const dialog = screen.getByRole("dialog", { name: "A1: HARB0002 beside the reference" });
  const pictures = () =>
    within(dialog)
      .getAllByRole("img")
      .map((picture) => picture.getAttribute("src"));
  const before = pictures();
  expect(before).toHaveLength(2);
  await userEvent.click(within(dialog).getByRole("button", { name: "Spot left" }));
  expect(pictures()).not.toEqual(before);
  await userEvent.click(within(dialog).getByRole("button", { name: "Frame after" }));
  expect(screen.getByRole("dialog", { name: "A1: HARB0003 beside the reference" })).toBeDefined();
});

test("loose frames have a bench of their own, behind the corner cell", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  await userEvent.click(screen.getByRole("button", { name: "4 loose frames: frames in no stack" }));
  const bench = screen.getByRole("region", { name: "Loose frames" });
  expect(within(bench).getAllByRole("row")).toHaveLength(4);
});

test("the other take of a tile can be laid on the bench", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  await userEvent.click(screen.getByRole("button", { name: /^Tile C6.*2 takes/ }));
  const takes = screen.getByRole("group", { name: "Takes of C6" });
  const second = within(takes).getByRole("button", { name: "Take 2" });
  await userEvent.click(second);
  expect(second.getAttribute("aria-pressed")).toBe("true");
});

test("the table sorts by any of its columns, what is not known last", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  await userEvent.click(screen.getByRole("button", { name: "Table" }));
  const names = () => screen.getAllByRole("rowheader").map((cell) => cell.textContent?.slice(0, 2));
  expect(names().slice(0, 2)).toEqual(["A1", "A2"]);
  await userEvent.click(screen.getByRole("button", { name: /^In use/ }));
  expect(names()[0]).toBe("C1");
  expect(names().at(-1)).toBe("B5");
  expect(screen.getByRole("columnheader", { name: /^In use/ }).getAttribute("aria-sort")).toBe("ascending");
});

test("without room the board is the table and one tile at a time", async () => {
  render(<Harness board={makeEventfulBoard()} isWide={false} />);
  expect(screen.queryByRole("region", { name: "Order taken" })).toBeNull();
  await userEvent.click(screen.getByRole("button", { name: "A3" }));
  expect(screen.getByRole("region", { name: "Frames of A3" })).toBeDefined();
  await userEvent.click(screen.getByRole("button", { name: "A4" }));
  expect(screen.getByRole("region", { name: "Frames of A4" })).toBeDefined();
  await userEvent.click(screen.getByRole("button", { name: "All tiles" }));
  expect(screen.getByRole("table")).toBeDefined();
});

test("arrow keys walk from place to place, a hole's link included; after a tile Tab leads to its bench", async () => {
  render(<Harness board={makeEventfulBoard()} />);
  const isFocused = (name: string) =>
    vi.waitFor(() => expect(document.activeElement?.getAttribute("data-tile")).toBe(name));
  await userEvent.click(screen.getByRole("button", { name: /^Tile B4/ }));
  // Past the tile's own handle.
  await userEvent.tab();
  await userEvent.tab();
  expect(screen.getByRole("region", { name: "Frames of B4" }).contains(document.activeElement)).toBe(true);
  screen.getByRole("button", { name: /^Tile B4/ }).focus();
  await userEvent.keyboard("{ArrowRight}");
  await isFocused("B5");
  expect(document.activeElement?.textContent).toBe("Bring in its frames");
  await userEvent.keyboard("{ArrowRight}");
  await isFocused("B6");
});

test("where a hole's cell has no room for its link, arrow keys pass over it", async () => {
  render(<Harness board={makeBoard({ rows: 2, columns: 12, framesPerTile: 2, holes: ["1,3"] })} />);
  screen.getByRole("button", { name: /^Tile A2/ }).focus();
  await userEvent.keyboard("{ArrowRight}");
  await vi.waitFor(() => expect(document.activeElement?.getAttribute("data-tile")).toBe("A4"));
});

test("without room a hole's question shows the tiles beside it and leads to the intake", async () => {
  render(<Harness board={makeEventfulBoard()} isWide={false} />);
  const docket = screen.getByRole("region", { name: "3 open questions" });
  await userEvent.click(within(docket).getByRole("button", { name: "Question before" }));
  expect(within(docket).getByRole("heading").textContent).toBe("Was B5 left out?");
  const pictures = within(docket).getByRole("list", { name: "Pictures that decide it, whole" });
  expect(
    within(pictures)
      .getAllByRole("listitem")
      .map((item) => item.textContent),
  ).toEqual(["B4", "B6"]);
  expect(within(docket).getByRole("link", { name: "Bring in frames of B5" }).getAttribute("href")).toBe(
    "/projects/project-1/intake",
  );
});

test("with 2 000 stacks only the rows in view are drawn", () => {
  render(<Harness board={makeBoard({ rows: 100, columns: 20, framesPerTile: 3 })} />);
  const drawn = screen.getAllByRole("button", { name: /^Tile / });
  expect(drawn.length).toBeGreaterThan(20);
  // 20 to a row: of 100 rows those that fill a window of 800 px, and a few beyond its edges.
  expect(drawn.length / 20).toBeLessThan(30);
});
