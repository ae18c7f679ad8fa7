import { expect, test } from "vitest";
import {
  answerShown,
  postponeShown,
  seeBoard,
  turnWalk,
  turnWalkTo,
  walkAt,
  walkOrder,
  WALK_BEGIN,
  type DocketWalk,
} from "@/lib/board/docket-walk";

const open = (...keys: string[]) => keys.map((key) => ({ key }));
const ABC = open("a", "b", "c");

function shown(questions: { key: string }[], walk: DocketWalk): string | undefined {
  return walkOrder(questions, walk)[walkAt(questions, walk)]?.key;
}

test("the walk begins with the worst question, and with none where none is open", () => {
  expect(shown(ABC, WALK_BEGIN)).toBe("a");
  expect(walkAt([], WALK_BEGIN)).toBe(-1);
  expect(turnWalk([], WALK_BEGIN, 1).shown).toBeNull();
});

test("it turns either way, and past its end begins again", () => {
  const second = turnWalk(ABC, WALK_BEGIN, 1);
  expect(shown(ABC, second)).toBe("b");
  expect(shown(ABC, turnWalk(ABC, second, -1))).toBe("a");
  expect(shown(ABC, turnWalk(ABC, WALK_BEGIN, -1))).toBe("c");
});

test("what is put off comes last, in the order put off, and stays in the walk", () => {
  const once = postponeShown(ABC, WALK_BEGIN);
  expect(walkOrder(ABC, once).map(({ key }) => key)).toEqual(["b", "c", "a"]);
  expect(shown(ABC, once)).toBe("b");
  const twice = postponeShown(ABC, once);
  expect(walkOrder(ABC, twice).map(({ key }) => key)).toEqual(["c", "a", "b"]);
  // All put off: the walk goes round.
  const thrice = postponeShown(ABC, twice);
  expect([shown(ABC, thrice), walkOrder(ABC, thrice).length]).toEqual(["a", 3]);
  expect(shown(ABC, postponeShown(ABC, thrice))).toBe("b");
});

test("putting off the only question leaves it where it is", () => {
  expect(shown(open("a"), postponeShown(open("a"), WALK_BEGIN))).toBe("a");
});

test("after an answer the question after it is shown, before the board has taken the answer in and after", () => {
  const walk = answerShown(ABC, turnWalkTo(WALK_BEGIN, "b"));
  expect(shown(ABC, walk)).toBe("c");
  expect(seeBoard(ABC, walk)).toBe(walk);
  const seen = seeBoard(open("a", "c"), walk);
  expect(shown(open("a", "c"), seen)).toBe("c");
  expect(shown(open("a"), seeBoard(open("a"), answerShown(open("a", "c"), seen)))).toBe("a");
});

test("the last answer leaves no question", () => {
  const walk = seeBoard([], answerShown(open("a"), WALK_BEGIN));
  expect(walkAt([], walk)).toBe(-1);
});

test("a question whose answer was taken back is shown again, once", () => {
  const walk = seeBoard(open("b", "c"), answerShown(ABC, WALK_BEGIN));
  expect(shown(open("b", "c"), walk)).toBe("b");
  const back = seeBoard(ABC, walk);
  expect(shown(ABC, back)).toBe("a");
  const on = turnWalk(ABC, back, 1);
  expect(seeBoard(ABC, on)).toBe(on);
});

test("a question that somebody else answered leads to the worst that is left", () => {
  expect(shown(open("a", "c"), turnWalkTo(WALK_BEGIN, "b"))).toBe("a");
});
