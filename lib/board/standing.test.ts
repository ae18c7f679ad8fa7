import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type RecordedStep, undoneSteps, undoStacksOf } from "@/lib/board/standing";

/** Builds a record in the order done; revisions count from 1. */
function makeRecord() {
  const steps: RecordedStep[] = [];
  const add = (userId: string | null, fields: Partial<RecordedStep> = {}) => {
    const revision = steps.length + 1;
    const step: RecordedStep = {
      id: `step-${revision}`,
      revision,
      userId,
      sentence: "",
      undoes: null,
      undoesAfter: null,
      isEmpty: false,
      ...fields,
    };
    steps.push(step);
    return step;
  };
  return { steps, add, undo: (userId: string, { id }: RecordedStep) => add(userId, { undoes: id }) };
}

const ids = (steps: readonly RecordedStep[]) => steps.map(({ id }) => id);

describe("which steps stand", () => {
  test("one that was taken back does not, until it is done again", () => {
    const { steps, add, undo } = makeRecord();
    const step = add("lena");
    const back = undo("lena", step);
    expect([...undoneSteps(steps)]).toEqual([step.id]);
    const again = undo("lena", back);
    expect([...undoneSteps(steps)]).toEqual([back.id]);
    undo("lena", again);
    expect([...undoneSteps(steps)].sort()).toEqual([step.id, again.id]);
  });

  test("going back takes back all that lies after, undos among them, whoever did it", () => {
    const { steps, add, undo } = makeRecord();
    const first = add("lena");
    const second = add("jonas");
    const undoing = undo("lena", first);
    const back = add("jonas", { undoesAfter: 1 });
    // The undo of the first is itself taken back: the first stands again.
    expect([...undoneSteps(steps)].sort()).toEqual([second.id, undoing.id]);
    undo("jonas", back);
    expect([...undoneSteps(steps)].sort()).toEqual([first.id, back.id]);
  });
});

describe("what a person can undo and redo", () => {
  test("is the newest own step, and the newest own undo while nothing else was done", () => {
    const { steps, add, undo } = makeRecord();
    const first = add("lena");
    add("jonas");
    const second = add("lena");
    expect(ids(undoStacksOf("lena", steps).undo)).toEqual([second.id, first.id]);
    const backOfSecond = undo("lena", second);
    const backOfFirst = undo("lena", first);
    expect(undoStacksOf("lena", steps)).toMatchObject({ undo: [], redo: [backOfFirst, backOfSecond] });
    const again = undo("lena", backOfFirst);
    expect(undoStacksOf("lena", steps)).toMatchObject({ undo: [again], redo: [backOfSecond] });
    add("jonas");
    expect(undoStacksOf("lena", steps).redo).toEqual([backOfSecond]);
    add("lena");
    expect(undoStacksOf("lena", steps).redo).toEqual([]);
  });

  test("leaves out what did nothing, what others did, and what somebody went back before", () => {
    const { steps, add } = makeRecord();
    const first = add("lena");
    add("lena", { isEmpty: true });
    add("lena");
    add("jonas", { undoesAfter: 1 });
    add(null);
    expect(ids(undoStacksOf("lena", steps).undo)).toEqual([first.id]);
  });

  test("behaves as the two stacks of a text editor do, for any sequence of one person's acts", () => {
    // The model is common practice: an act is pushed on one stack and clears the other; undo and redo pop and push.
    const acts = fc.array(fc.constantFrom("act", "undo", "redo"), { maxLength: 40 });
    fc.assert(
      fc.property(acts, (sequence) => {
        const { steps, add, undo } = makeRecord();
        let counter = 0;
        let done: number[] = [];
        let undone: number[] = [];
        const acted = new Map<string, number>();
        for (const act of sequence) {
          const stacks = undoStacksOf("lena", steps);
          expect(stacks.undo[0] ? acted.get(stacks.undo[0].id) : undefined).toBe(done.at(-1));
          expect(stacks.redo[0] ? acted.get(stacks.redo[0].id) : undefined).toBe(undone.at(-1));
          if (act === "act") {
            acted.set(add("lena").id, counter);
            done = [...done, counter];
            undone = [];
            counter += 1;
            continue;
          }
          const [step] = act === "undo" ? stacks.undo : stacks.redo;
          if (!step) continue;
          const [from, to] = act === "undo" ? [done, undone] : [undone, done];
          const moved = from.pop() ?? -1;
          to.push(moved);
          acted.set(undo("lena", step).id, moved);
        }
      }),
    );
  });
});
