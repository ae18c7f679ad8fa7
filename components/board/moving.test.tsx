// @vitest-environment jsdom
import { cleanup, render, screen, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { useState } from "react";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { BoardCommandsContext } from "@/components/board/board-commands";
import { Sheet } from "@/components/board/sheet";
import type { BoardViewName } from "@/components/board/use-board-place";
import { indexBoard } from "@/lib/board/board-index";
import { applyChanges, ChangeConflict } from "@/lib/board/changes";
import { boardCommandSchema, type CommandDraft, type PlannedCommand } from "@/lib/board/command-schema";
import { planCommand } from "@/lib/board/plan-command";
import { makeBoardCommands } from "@/tests/support/board-commands";
import { makeEventfulBoard } from "@/tests/support/make-board";

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
  Element.prototype.hasPointerCapture = () => false;
  const sizes = { clientWidth: 1200, clientHeight: 800, offsetWidth: 1200, offsetHeight: 800 };
  for (const [name, value] of Object.entries(sizes)) {
    vi.spyOn(HTMLElement.prototype, name as "offsetWidth", "get").mockReturnValue(value);
  }
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

const given: CommandDraft[] = [];
const heard: string[] = [];

/** The sheet of an editor; commands change the board at once, as with the real provider. */
function Editor({
  chosen: first = null,
  isWide = true,
}: {
  readonly chosen?: string | null;
  readonly isWide?: boolean;
}) {
  const [board, setBoard] = useState(makeEventfulBoard);
  const [chosen, setChosen] = useState<string | null>(first);
  const [view, setView] = useState<BoardViewName>("grid");
  const run = (draft: CommandDraft) => {
    const command = boardCommandSchema.parse({ ...draft, id: crypto.randomUUID(), revision: 1 });
    try {
      setBoard(applyChanges(board, planCommand(board, command as PlannedCommand)));
    } catch (error) {
      if (!(error instanceof ChangeConflict)) throw error;
      return false;
    }
    given.push(draft);
    return true;
  };
  const commands = makeBoardCommands({ canEdit: true, run, announce: (message) => heard.push(message) });
  return (
    <BoardCommandsContext value={commands}>
      <Sheet
        index={indexBoard(board)}
        {...{ chosen, view, isWide }}
        onChoose={setChosen}
        onShow={setView}
        saved={null}
      />
    </BoardCommandsContext>
  );
}

function open(props: Parameters<typeof Editor>[0] = {}) {
  given.length = 0;
  heard.length = 0;
  render(<Editor {...props} />);
}

const frame = (name: string) => screen.getByRole("row", { name: new RegExp(`^${name}`) });
const selectedNames = () =>
  screen
    .getAllByRole("row")
    .filter((row) => row.getAttribute("aria-selected") === "true")
    .map((row) => row.getAttribute("aria-label")?.slice(0, 8));

test("a click selects, Shift as far as there, Ctrl one more; Escape selects nothing", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(within(frame("HARB0014")).getByText("HARB0014"));
  await user.keyboard("{Shift>}");
  await user.click(within(frame("HARB0016")).getByText("HARB0016"));
  await user.keyboard("{/Shift}{Control>}");
  await user.click(within(frame("HARB0019")).getByText("HARB0019"));
  await user.keyboard("{/Control}");
  expect(selectedNames()).toEqual(["HARB0014", "HARB0015", "HARB0016", "HARB0019"]);
  expect(screen.getByRole("region", { name: "Selected frames" }).textContent).toContain("4 frames selected");
  frame("HARB0014").focus();
  await user.keyboard("{Escape}");
  expect(selectedNames()).toEqual([]);
  // The first Escape only lets go of the frames; the bench is still open.
  expect(screen.getByRole("region", { name: "Frames of A3" })).toBeDefined();
});

test("by keys: arrows with Shift select on the way, Ctrl+A all; they are moved as one command", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  frame("HARB0014").focus();
  await user.keyboard("{Shift>}{ArrowRight}{ArrowRight}{/Shift}");
  expect(selectedNames()).toEqual(["HARB0014", "HARB0015", "HARB0016"]);
  await user.keyboard("{Control>}a{/Control}");
  expect(selectedNames()).toHaveLength(6);
  await user.click(screen.getByRole("button", { name: "Move to…" }));
  const dialog = screen.getByRole("dialog", { name: "Move 6 frames to…" });
  await user.keyboard("4a");
  expect(within(dialog).getByText("The row's letters come first: A4.")).toBeDefined();
  await user.clear(within(dialog).getByLabelText("Tile or place"));
  await user.keyboard("a4");
  expect(within(dialog).getByRole("status").textContent).toBe(
    "They would go from A3 to A4. A4 would have 12 frames. A3 would be a hole.",
  );
  await user.keyboard("{Enter}");
  expect(given).toHaveLength(1);
  expect(given[0]).toMatchObject({ type: "move-frames", to: { kind: "stack", stackId: "stack-1-4" } });
  expect(screen.getByRole("button", { name: /^Tile A4, 12 of 12/ })).toBeDefined();
  expect(screen.queryByRole("dialog")).toBeNull();
});

test("a stack is moved by name; where the place is taken, one says what happens to its stack", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Change A3" }));
  await user.click(screen.getByRole("menuitem", { name: "Move A3 to…" }));
  await user.type(screen.getByLabelText("Tile or place"), "b2");
  await user.click(screen.getByRole("radio", { name: /^Shift the rest of the row/ }));
  expect(screen.getByRole("dialog").textContent).toContain("B2 to B4 would go one place to the right.");
  await user.click(screen.getByRole("button", { name: "Move" }));
  expect(given).toEqual([
    { type: "place-stack", stackId: "stack-1-3", place: { row: 2, column: 2 }, occupied: "push" },
  ]);
  expect(screen.getByRole("group", { name: /^A3 is a hole/ })).toBeDefined();
});

test("one frame's menu sets aside with a reason, brings back, splits, makes the reference", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  const act = async (name: string, item: string) => {
    await user.click(within(frame(name)).getByRole("button", { name: `Actions for ${name}` }));
    await user.click(screen.getByRole("menuitem", { name: item }));
  };
  await act("HARB0014", "Set aside as moved");
  expect(frame("HARB0014").getAttribute("aria-label")).toContain("set aside: moved");
  await act("HARB0014", "Bring back");
  await act("HARB0018", "Make it the reference");
  expect(frame("HARB0018").getAttribute("aria-label")).toContain("reference");
  await act("HARB0018", "Split the stack before it");
  expect(screen.getByText(/^1 stack without a place/)).toBeDefined();
  expect(given.map(({ type }) => type)).toEqual(["set-aside", "bring-back", "choose-reference", "split-stack"]);
  await user.click(within(frame("HARB0014")).getByRole("button", { name: "Actions for HARB0014" }));
  expect(screen.getByRole("menuitem", { name: "Download HARB0014.JPG" }).getAttribute("href")).toBe(
    "/api/projects/project-1/files/file-12/original",
  );
});

test("all soft frames, or a row, are selected from one menu and brought back as one command", async () => {
  open();
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Select…" }));
  await user.click(screen.getByRole("menuitem", { name: /^All soft frames/ }));
  await user.click(screen.getByRole("button", { name: "Bring back" }));
  expect(given).toEqual([{ type: "bring-back", frameIds: ["frame-8"] }]);
  await user.click(screen.getByRole("button", { name: "Select…" }));
  await user.click(screen.getByRole("menuitem", { name: /^All frames in row B/ }));
  expect(screen.getByRole("region", { name: "Selected frames" }).textContent).toContain(
    "30 frames selected in 5 places",
  );
});

test("lines are added from their letter, and only an empty one is removed", async () => {
  open();
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Change row B" }));
  expect(screen.getByRole("menuitem", { name: "To remove row B, move its 5 stacks first" })).toHaveProperty(
    "ariaDisabled",
    "true",
  );
  await user.click(screen.getByRole("menuitem", { name: "Add a row above B" }));
  expect(screen.getByRole("group", { name: /^B1 is a hole/ })).toBeDefined();
  await user.click(screen.getByRole("button", { name: "Change row B" }));
  await user.click(screen.getByRole("menuitem", { name: "Remove row B" }));
  expect(screen.queryByRole("group", { name: /^B1 is a hole/ })).toBeNull();
});

test("a stack is settled only when its questions are answered", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Change A3" }));
  expect(screen.getByRole("menuitem", { name: "To be settled: answer 1 question first" })).toBeDefined();
  await user.keyboard("{Escape}");
  await user.click(screen.getByRole("button", { name: /^Tile A1/ }));
  await user.click(screen.getByRole("button", { name: "Change A1" }));
  await user.click(screen.getByRole("menuitem", { name: "Mark as settled" }));
  expect(within(screen.getByRole("region", { name: "Frames of A1" })).getByText("settled")).toBeDefined();
});

test("two stacks are merged by name", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Change A3" }));
  await user.click(screen.getByRole("menuitem", { name: "Merge A3 with…" }));
  await user.keyboard("b5");
  expect(screen.getByText("There is no stack to merge with. Write a tile that has frames.")).toBeDefined();
  await user.clear(screen.getByLabelText("Tile that takes its frames"));
  await user.keyboard("a4{Enter}");
  expect(given).toEqual([{ type: "merge-stacks", intoStackId: "stack-1-4", stackIds: ["stack-1-3"] }]);
});

test("picked up by a tap, a first tap on a tile shows what would happen, the second does it", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Move HARB0019" }));
  const tile = screen.getByRole("button", { name: /^Tile A4/ });
  await user.click(tile);
  expect(given).toEqual([]);
  expect(screen.getByRole("region", { name: "Picked up" }).textContent).toContain(
    "It would go from A3 to A4. A4 would have 7 frames.",
  );
  expect(heard.at(-1)).toBe("HARB0019 over A4. It would go from A3 to A4. A4 would have 7 frames.");
  await user.click(tile);
  expect(given).toHaveLength(1);
  expect(screen.getByRole("button", { name: /^Tile A4, 7 of 7/ })).toBeDefined();
});

test("the boundary between two brackets goes one frame on", async () => {
  open();
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Boundary between A1 and A2" }));
  await user.click(screen.getByRole("button", { name: "One frame later: HARB0008 to A1" }));
  expect(screen.getByRole("button", { name: /^Tile A1, 7 of 7/ })).toBeDefined();
  expect(screen.getByRole("button", { name: /^Tile A2, 4 of 5/ })).toBeDefined();
});

test("on a phone a frame is chosen by a tap and moved by name", async () => {
  open({ chosen: "A3", isWide: false });
  const user = userEvent.setup();
  expect(screen.queryByRole("button", { name: "Move HARB0019" })).toBeNull();
  await user.click(within(frame("HARB0019")).getByText("HARB0019"));
  await user.click(screen.getByRole("button", { name: "Move to…" }));
  await user.keyboard("loose{Enter}");
  expect(given).toEqual([{ type: "move-frames", frameIds: ["frame-17"], to: { kind: "loose" } }]);
});

test("a place far beyond the grid is asked about before the grid grows", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(screen.getByRole("button", { name: "Change A3" }));
  await user.click(screen.getByRole("menuitem", { name: "Move A3 to…" }));
  await user.keyboard("a9{Enter}{Enter}");
  expect(screen.getByRole("alert").textContent).toContain(
    "The grid would grow from 6 to 9 columns; 8 places would be empty.",
  );
  expect(given).toEqual([]);
  await user.click(screen.getByRole("button", { name: "Grow the grid and move" }));
  expect(given).toEqual([{ type: "place-stack", stackId: "stack-1-3", place: { row: 1, column: 9 } }]);
});

test("the tiles of selected frames say how many", async () => {
  open({ chosen: "A3" });
  const user = userEvent.setup();
  await user.click(within(frame("HARB0014")).getByText("HARB0014"));
  const tile = screen.getByRole("button", { name: /^Tile A3/ });
  expect(tile.textContent).toContain("✓ 1");
  expect(screen.getByRole("button", { name: /^Tile A4/ }).textContent).not.toContain("✓ 1");
});

test("on a phone the list of tiles comes by itself when a frame is picked up", async () => {
  open({ chosen: "A3", isWide: false });
  const user = userEvent.setup();
  await user.click(within(frame("HARB0019")).getByText("HARB0019"));
  await user.click(screen.getByRole("button", { name: "Pick up" }));
  expect(screen.getByRole("rowheader", { name: "B1" })).toBeDefined();
});
