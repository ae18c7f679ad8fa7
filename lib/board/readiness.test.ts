import { expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import { openPoints, setAsideCounts } from "@/lib/board/readiness";
import { makeBoard, makeEventfulBoard } from "@/tests/support/make-board";

test("what is missing or unsettled is listed, worst first", () => {
  const points = openPoints(indexBoard(makeEventfulBoard()));
  expect(points.map(({ text }) => text)).toEqual([
    "1 hole: B5",
    "3 open questions",
    "1 tile with fewer frames than wanted: C1",
    expect.stringMatching(/^2 small overlaps: [A-C]\d–[A-C]\d \d\d %, [A-C]\d–[A-C]\d \d\d %$/),
    "4 loose frames",
  ]);
});

test("a board on which all is well has no open points", () => {
  expect(openPoints(indexBoard(makeBoard({ rows: 2, columns: 2, framesPerTile: 4 })))).toEqual([]);
});

test("frames set aside are counted by reason", () => {
  expect(setAsideCounts(indexBoard(makeEventfulBoard()))).toEqual([
    { reason: "soft", count: 1 },
    { reason: "moved", count: 1 },
    { reason: "exposure", count: 3 },
  ]);
});
