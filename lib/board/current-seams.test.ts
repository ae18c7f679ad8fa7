import { expect, test } from "vitest";
import { indexBoard } from "@/lib/board/board-index";
import { applyChanges, invertChanges, type Change } from "@/lib/board/changes";
import { changeSchema } from "@/lib/board/change-schema";
import { boardCommandSchema, type PlannedCommand } from "@/lib/board/command-schema";
import { currentSeams, unmeasuredSeams } from "@/lib/board/current-seams";
import type { Board } from "@/lib/board/model";
import { planCommand } from "@/lib/board/plan-command";
import { openPoints } from "@/lib/board/readiness";
import { leastOverlaps } from "@/lib/board/summary";
import { buildManifest } from "@/lib/handover/manifest";
import { makeBoard } from "@/tests/support/make-board";

const BOARD = makeBoard({ rows: 2, columns: 3, framesPerTile: 4 });

function after(board: Board, fields: object): Board {
  const command = boardCommandSchema.parse({ id: crypto.randomUUID(), revision: 1, ...fields }) as PlannedCommand;
  return applyChanges(board, planCommand(board, command));
}

const pairs = (board: Board) => currentSeams(board).map((seam) => `${seam.stackId} ${seam.neighbourId} ${seam.side}`);

test("a board as it was sorted has the seams that were measured", () => {
  expect(pairs(BOARD).sort()).toEqual(BOARD.seams.map((s) => `${s.stackId} ${s.neighbourId} ${s.side}`).sort());
  expect(currentSeams(BOARD).every(({ overlap }) => overlap !== null)).toBe(true);
  expect(unmeasuredSeams(BOARD)).toEqual([]);
});

test("two tiles that changed places have seams with their new neighbours, unmeasured and not thin", () => {
  const place = { row: 1, column: 3 };
  const moved = after(BOARD, { type: "place-stack", stackId: "stack-1-1", place, occupied: "swap" });
  expect(pairs(moved)).toContain("stack-1-3 stack-1-2 right");
  expect(pairs(moved)).not.toContain("stack-1-1 stack-1-2 right");
  // What lies beside it on the other side now was measured the other way round.
  expect(unmeasuredSeams(moved).map(({ stackId, side }) => `${stackId} ${side}`)).toEqual([
    "stack-1-3 right",
    "stack-1-3 below",
    "stack-1-2 right",
    "stack-1-1 below",
  ]);
  expect(openPoints(indexBoard(moved)).filter(({ kind }) => kind === "seams")).toEqual([]);
});

test("what was thin is no longer told of tiles that are no neighbours any more", () => {
  const thin = BOARD.seams.map((seam) =>
    seam.stackId === "stack-1-1" && seam.side === "right" ? { ...seam, overlap: 0.1 } : seam,
  );
  const board = { ...BOARD, seams: thin };
  expect(openPoints(indexBoard(board)).find(({ kind }) => kind === "seams")?.text).toContain("A1–A2 10 %");
  const moved = after(board, { type: "place-stack", stackId: "stack-1-1", place: { row: 4, column: 5 } });
  expect(openPoints(indexBoard(moved)).filter(({ kind }) => kind === "seams")).toEqual([]);
  expect(leastOverlaps(indexBoard(moved)).get("D5")).toBeUndefined();
  const manifest = buildManifest(moved, { createdAt: "2026-05-09T10:00:00.000Z", hasProjectId: true });
  const none = { left: null, right: null, above: null, below: null };
  expect(manifest.stacks.find(({ id }) => id === "stack-1-1")?.overlap).toEqual(none);
  // And back: what was measured then counts again.
  const back = after(moved, { type: "place-stack", stackId: "stack-1-1", place: { row: 1, column: 1 } });
  expect(leastOverlaps(indexBoard(back)).get("A1")).toBe(0.1);
});

test("only chosen takes have seams", () => {
  const place = { row: 1, column: 1 };
  const moved = after(BOARD, { type: "place-stack", stackId: "stack-2-3", place, occupied: "take" });
  expect(pairs(moved).filter((pair) => pair.includes("stack-2-3"))).toEqual([]);
});

test("measured seams can be exchanged and taken back, and are sent as they are", () => {
  const [first, second] = BOARD.seams;
  if (!first || !second) throw new Error("no seams");
  const added = { stackId: "stack-2-2", neighbourId: "stack-1-1", side: "right" as const, overlap: null };
  const changes: Change[] = [{ on: "seams", before: [first, second], after: [{ ...first, overlap: 0.5 }, added] }];
  const start = applyChanges(BOARD, []);
  const changed = applyChanges(start, changes);
  expect(changed.seams).toContainEqual({ ...first, overlap: 0.5 });
  expect(changed.seams).toContainEqual(added);
  expect(changed.seams).not.toContainEqual(second);
  expect(applyChanges(changed, invertChanges(changes))).toEqual(start);
  expect(changeSchema.array().parse(JSON.parse(JSON.stringify(changes)))).toEqual(changes);
});
