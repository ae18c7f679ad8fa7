import { expect, test } from "vitest";
import { boardCommandSchema, type CommandDraft, type PlannedCommand } from "@/lib/board/command-schema";
import { commandSentence } from "@/lib/board/command-sentence";
import { makeEventfulBoard } from "@/tests/support/make-board";

const BOARD = makeEventfulBoard();

function sentence(draft: CommandDraft): string {
  const command = boardCommandSchema.parse({ ...draft, id: "5f0c3f8e-58c9-4dd1-9a0e-0d8b3c3a2f11", revision: 1 });
  return commandSentence(BOARD, command as PlannedCommand, (id) => (id === "user-2" ? "Jonas" : null));
}

test("a command is said in names of frames and tiles", () => {
  const frameIds = ["frame-17"];
  expect(sentence({ type: "move-frames", frameIds, to: { kind: "stack", stackId: "stack-1-4" } })).toBe(
    "Moved HARB0019 from A3 to A4",
  );
  expect(sentence({ type: "move-frames", frameIds, to: { kind: "loose" } })).toBe("Took HARB0019 out of A3");
  expect(
    sentence({
      type: "move-frames",
      frameIds: ["frame-102", "frame-17"],
      to: { kind: "new-stack", stackId: "new", place: { row: 2, column: 5 } },
    }),
  ).toBe("Moved HARB0104 and HARB0019 to B5, a new stack");
  expect(sentence({ type: "set-aside", frameIds: ["frame-0", "frame-1", "frame-2", "frame-3"], reason: "soft" })).toBe(
    "Set 4 frames aside: soft",
  );
  expect(sentence({ type: "place-stack", stackId: "stack-1-1", place: { row: 2, column: 5 } })).toBe("Placed A1 at B5");
  expect(sentence({ type: "choose-take", stackId: "stack-3-6-take-2" })).toBe("Chose C6 take 2");
  expect(sentence({ type: "add-line", axis: "row", at: 27 })).toBe("Added row AA");
  expect(sentence({ type: "remove-line", axis: "column", at: 2 })).toBe("Removed column 2");
  expect(sentence({ type: "settle", target: { kind: "question", questionId: "question-1", answer: 1 } })).toBe(
    "Settled “Does HARB0019 belong to A4?”: Keep in A3",
  );
  expect(sentence({ type: "assign", stackIds: ["stack-1-1", "stack-1-2"], userId: "user-2" })).toBe(
    "Gave A1 and A2 to Jonas",
  );
});
