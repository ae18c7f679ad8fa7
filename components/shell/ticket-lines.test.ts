import { expect, test } from "vitest";
import { ticketLines, type TicketStatus } from "@/components/shell/ticket-lines";

const NOTHING: TicketStatus = {
  received: 0,
  analysed: 0,
  failed: 0,
  total: 0,
  sorted: false,
  frames: 0,
  tiles: 0,
  openQuestions: 0,
};

function texts(status: Partial<TicketStatus>): string[] {
  const { intake, board, handover } = ticketLines({ ...NOTHING, ...status });
  return [intake.text, board.text, handover.text];
}

test("an empty project says that nothing came in", () => {
  expect(texts({})).toEqual(["nothing yet", "not yet", "not yet"]);
});

test("while files come in, the first stub counts them and the board waits", () => {
  expect(texts({ total: 108, received: 54, analysed: 20 })).toEqual([
    "54 files in, more to come",
    "sorting",
    "not yet",
  ]);
});

test("once all are in, the first stub counts what is measured", () => {
  expect(texts({ total: 108, received: 108, analysed: 90, failed: 1 })[0]).toBe("91 of 108 files measured");
});

test("an upload that never finishes does not stop the board and the handover", () => {
  const status = { total: 109, received: 108, analysed: 108, sorted: true, tiles: 18 };
  expect(texts(status)).toEqual(["108 files in, more to come", "18 tiles, no questions", "ready"]);
});

test("open questions are ochre on the board and named at the handover", () => {
  const lines = ticketLines({
    ...NOTHING,
    total: 108,
    received: 108,
    analysed: 108,
    sorted: true,
    tiles: 17,
    openQuestions: 3,
  });
  expect(lines.board).toEqual({ text: "17 tiles, 3 questions", tone: "ochre" });
  expect(lines.handover).toEqual({ text: "ready, 3 open", tone: "ochre" });
});

test("once all is measured, frames are counted: a raw file and its picture are one", () => {
  const status = { total: 216, received: 216, analysed: 216, sorted: true, frames: 108, tiles: 18 };
  expect(texts(status)[0]).toBe("108 frames");
});

test("unreadable files are said at the intake, as a failure", () => {
  const { intake } = ticketLines({
    ...NOTHING,
    total: 3,
    received: 3,
    analysed: 2,
    failed: 1,
    sorted: true,
    frames: 2,
    tiles: 1,
  });
  expect(intake).toEqual({ text: "2 frames, 1 unreadable", tone: "madder" });
});

test("frames added later leave the tiles in place while they are sorted", () => {
  expect(texts({ total: 112, received: 112, analysed: 110, tiles: 18 })[1]).toBe("18 tiles, sorting again");
});
