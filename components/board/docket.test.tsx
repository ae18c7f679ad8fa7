// @vitest-environment jsdom
import { cleanup, render, screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { useState } from "react";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { Docket } from "@/components/board/docket";
import { useDocket } from "@/components/board/use-docket";
import { indexBoard } from "@/lib/board/board-index";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board, BoardQuestion } from "@/lib/board/model";
import { LocalBoard } from "@/tests/support/local-board";
import { makeEventfulBoard } from "@/tests/support/make-board";

let sent: CommandDraft[];
let said: string[];

beforeEach(() => {
  sent = [];
  said = [];
  vi.stubGlobal("matchMedia", () => ({ matches: false, addEventListener() {}, removeEventListener() {} }));
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

function Desk({ board }: { readonly board: Board }) {
  const [tile, setTile] = useState<string | null>(null);
  const index = indexBoard(board);
  const onChoose = (name: string | null) => setTile(name);
  const docket = useDocket({ index, chosen: tile, onChoose });
  return (
    <>
      <Docket index={index} docket={docket} chosen={tile} onShowTile={onChoose} />
      {["A3", "C1"].map((name) => (
        <button key={name} type="button" onClick={() => setTile(name)}>
          Open {name}
        </button>
      ))}
      <button type="button" onClick={() => setTile(null)}>
        Close
      </button>
      <output>{tile ?? "nothing"} is open</output>
    </>
  );
}

function open(board = makeEventfulBoard(), canEdit = true) {
  let present = board;
  render(
    <LocalBoard
      board={board}
      canEdit={canEdit}
      onRun={(draft) => sent.push(draft)}
      onAnnounce={(text) => said.push(text)}
    >
      {(now) => {
        present = now;
        return <Desk board={now} />;
      }}
    </LocalBoard>,
  );
  return () => present;
}

const user = userEvent.setup();
const press = (name: string) => user.click(screen.getByRole("button", { name }));
/** Right after an answer, the next question takes none. */
const untilItTakesAnAnswer = () =>
  waitFor(() => expect(document.querySelector("[aria-disabled]")).toBeNull(), { timeout: 2_000 });
const heading = () => screen.queryByRole("heading")?.textContent ?? null;
const expectOpen = (name: string) => expect(screen.getByRole("status").textContent).toBe(`${name} is open`);
const group = () => screen.getByRole("group");

test("an answer does what it says, the next question comes by itself and has the focus, and both are said", async () => {
  const board = open();
  expect(heading()).toBe("Does HARB0019 belong to A4?");
  await press("Move to A4");
  expect(board().frames.find(({ id }) => id === "frame-17")?.stackId).toBe("stack-1-4");
  expect(board().questions.map(({ id }) => id)).toEqual(["question-2", "question-3"]);
  expect(heading()).toBe("Are 3 frames enough for C1?");
  expect(document.activeElement).toBe(group());
  expectOpen("C1");
  expect(said).toEqual([
    expect.stringMatching(/^Move to A4: answered\. 2 questions open\. Are 3 frames enough for C1\?/),
  ]);
});

test("only an answer that the measurements speak for and that loses nothing is in petrol", async () => {
  open();
  const answers = ["Move to A4", "Keep in A3", "Decide later"].map((name) => screen.getByRole("button", { name }));
  expect(answers.map((button) => button.className.includes("bg-petrol"))).toEqual([true, false, false]);
  await press("Question after");
  expect(screen.getByRole("button", { name: "Keep as it is" }).className).not.toContain("bg-petrol");
});

test("a double-click answers one question, and what it did can be undone beside the next", async () => {
  const board = open();
  await press("Move to A4");
  expect(heading()).toBe("Are 3 frames enough for C1?");
  await press("Keep as it is");
  await press("Decide later");
  expect(heading()).toBe("Are 3 frames enough for C1?");
  expect(sent).toHaveLength(1);
  expect(screen.getByText("HARB0019 moved to A4.")).toBeDefined();
  await press("Undo");
  expect(board().questions).toHaveLength(3);
  expect(heading()).toBe("Does HARB0019 belong to A4?");
  expect(screen.queryByText("HARB0019 moved to A4.")).toBeNull();
  await untilItTakesAnAnswer();
  await press("Keep in A3");
  expect(heading()).toBe("Are 3 frames enough for C1?");
});

test("what is decided later stays open and comes again at the end", async () => {
  const board = open();
  await press("Decide later");
  expect(heading()).toBe("Are 3 frames enough for C1?");
  expect(screen.getByText("question 1 of 3, 1 put off")).toBeDefined();
  expect(document.activeElement).toBe(group());
  await untilItTakesAnAnswer();
  await press("Decide later");
  await untilItTakesAnAnswer();
  await press("Decide later");
  expect(heading()).toBe("Does HARB0019 belong to A4?");
  expect([sent.length, board().questions.length]).toEqual([0, 3]);
});

test("the walk is worked to zero with Tab and Enter alone, and says what to do next", async () => {
  const board = open();
  group().focus();
  // The first button after the question turns back: Tab passes the two that turn, and stands on the recommended answer.
  for (const answer of ["Move to A4", "Keep as it is", "Keep the hole"]) {
    await untilItTakesAnAnswer();
    while (document.activeElement?.textContent !== answer) await userEvent.tab();
    await userEvent.keyboard("{Enter}");
  }
  expect(board().questions).toEqual([]);
  expect(heading()).toBeNull();
  expect(screen.getByRole("region", { name: "no open questions" })).toBeDefined();
  expect(screen.getByRole("link", { name: "hand it over" }).getAttribute("href")).toBe("/projects/project-1/handover");
  expect(document.activeElement).toBe(group());
  expect(said.at(-1)).toBe("Keep the hole: answered. No open questions.");
});

test("arrow keys turn the questions while the question itself has the focus, and only then", async () => {
  open();
  group().focus();
  await userEvent.keyboard("{ArrowRight}");
  expect(heading()).toBe("Are 3 frames enough for C1?");
  await userEvent.keyboard("{ArrowLeft}{ArrowLeft}");
  expect(heading()).toBe("Was B5 left out?");
  screen.getByRole("button", { name: "Keep the hole" }).focus();
  await userEvent.keyboard("{ArrowRight}");
  expect(heading()).toBe("Was B5 left out?");
  expect(sent).toEqual([]);
});

test("turning opens the question's tile once: what a person closes stays closed", async () => {
  open();
  expectOpen("nothing");
  await press("Question after");
  expectOpen("C1");
  await press("Close");
  expectOpen("nothing");
  await press("Show C1");
  expectOpen("C1");
  expect(screen.queryByRole("button", { name: "Show C1" })).toBeNull();
  // A hole has nothing to open.
  await press("Question after");
  expect(heading()).toBe("Was B5 left out?");
  expectOpen("nothing");
});

test("it turns to the question of a tile that is chosen, and stays where it was turned within one tile", async () => {
  open();
  await press("Open C1");
  expect(heading()).toBe("Are 3 frames enough for C1?");
  await press("Open A3");
  expect(heading()).toBe("Does HARB0019 belong to A4?");
});

test("a question whose answer is taken back comes back onto the docket", async () => {
  open();
  await press("Move to A4");
  await press("Take back");
  expect(heading()).toBe("Does HARB0019 belong to A4?");
});

test("an answer that cannot be carried out leaves its question where it is", async () => {
  const board = makeEventfulBoard();
  const gone = {
    label: "Move to A9",
    action: { type: "move-frames", frameIds: ["frame-17"], toStackId: "no-such" },
  } as const;
  open({ ...board, questions: board.questions.map((question) => ({ ...question, answers: [gone] })) });
  await press("Move to A9");
  expect(heading()).toBe("Does HARB0019 belong to A4?");
  expect(said).toEqual(["This stack is no longer there."]);
  // The way out that every question has.
  await press("Keep it as it is");
  expect(heading()).not.toBe("Does HARB0019 belong to A4?");
});

test("an answer that splits a stack makes a new one", async () => {
  const board = makeEventfulBoard();
  const question: BoardQuestion = {
    ...(board.questions[0] as BoardQuestion),
    answers: [
      { label: "Split at HARB0019", action: { type: "split-stack", stackId: "stack-1-3", atFrameId: "frame-15" } },
    ],
  };
  const now = open({ ...board, questions: [question] });
  await press("Split at HARB0019");
  expect(now().stacks).toHaveLength(board.stacks.length + 1);
});

test("a viewer sees the question and whom it waits for, and has nothing to press", () => {
  open(makeEventfulBoard(), false);
  expect(heading()).toBe("Does HARB0019 belong to A4?");
  expect(screen.queryByRole("button", { name: "Move to A4" })).toBeNull();
  expect(screen.queryByRole("button", { name: "Decide later" })).toBeNull();
  expect(screen.getByText(/^An editor or the lead answers it/)).toBeDefined();
});

test("the pictures that decide it stand beside it, named", () => {
  open();
  const pictures = screen.getByRole("list", { name: "Pictures that decide it, at 100 %" });
  expect(
    within(pictures)
      .getAllByRole("listitem")
      .map((item) => item.textContent),
  ).toEqual(["HARB0019", "A3", "A4"]);
});
