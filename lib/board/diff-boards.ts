import type { Change, FramePatch, QuestionChange, StackPatch } from "@/lib/board/changes";
import type { Board, BoardFrame, BoardStack } from "@/lib/board/model";

const FRAME_FIELDS = [
  "stackId",
  "setAside",
  "placedBy",
  "relativeSharpness",
  "shift",
  "confidence",
  "reason",
] as const satisfies readonly (keyof FramePatch)[];
const STACK_FIELDS = [
  "row",
  "column",
  "take",
  "isChosenTake",
  "referenceId",
  "isSettled",
  "shareUserId",
  "confidence",
  "reason",
  "placedBy",
] as const satisfies readonly (keyof StackPatch)[];

/**
 * The changes that lead from one board to another, as one step that can be recorded and taken back. A frame that only
 * the later board has counts as having been loose and in use; one that only the earlier has is left out: frames do not
 * go. Positions, seams, order taken and pauses are no decisions and are not among the changes.
 */
export function diffBoards(before: Board, after: Board): Change[] {
  const stacks = new Map(before.stacks.map((stack) => [stack.id, stack]));
  const frames = new Map(before.frames.map((frame) => [frame.id, frame]));
  const stackIds = new Set(after.stacks.map(({ id }) => id));
  return [
    ...after.stacks.filter(({ id }) => !stacks.has(id)).map((stack): Change => ({ on: "new-stack", stack })),
    ...after.frames.flatMap((frame) => diffFrame(frames.get(frame.id), frame)),
    ...after.stacks.flatMap((stack) => diffStack(stacks.get(stack.id), stack)),
    ...before.stacks.filter(({ id }) => !stackIds.has(id)).map((stack): Change => ({ on: "no-stack", stack })),
    ...diffGrid(before, after),
    ...diffQuestions(before, after),
  ];
}

function diffFrame(known: BoardFrame | undefined, frame: BoardFrame): Change[] {
  if (known === frame) return [];
  const { before, after } = diffFields(known ?? { ...frame, ...LOOSE }, frame, FRAME_FIELDS);
  return Object.keys(after).length === 0 ? [] : [{ on: "frame", id: frame.id, before, after }];
}

/** A frame that no sorting has seen, as the database has it. */
const LOOSE = {
  stackId: null,
  setAside: null,
  placedBy: "computation",
  relativeSharpness: null,
  shift: null,
  confidence: 0,
  reason: "",
} as const satisfies FramePatch;

function diffStack(known: BoardStack | undefined, stack: BoardStack): Change[] {
  if (!known || known === stack) return [];
  const { before, after } = diffFields(known, stack, STACK_FIELDS);
  return Object.keys(after).length === 0 ? [] : [{ on: "stack", id: stack.id, before, after }];
}

function diffFields<Entity extends object, Field extends keyof Entity>(
  was: Entity,
  is: Entity,
  fields: readonly Field[],
): { before: Partial<Pick<Entity, Field>>; after: Partial<Pick<Entity, Field>> } {
  const before: Partial<Pick<Entity, Field>> = {};
  const after: Partial<Pick<Entity, Field>> = {};
  for (const field of fields) {
    // Shifts are the only values that are objects, of two numbers.
    if (was[field] === is[field] || JSON.stringify(was[field]) === JSON.stringify(is[field])) continue;
    before[field] = was[field];
    after[field] = is[field];
  }
  return { before, after };
}

/**
 * What several changes come to, as one step. Each question goes the way it went in them: withdrawn or answered.
 * @param changes - lead from `before` to `after`
 */
export function sumOfChanges(before: Board, after: Board, changes: readonly Change[]): Change[] {
  const first = new Map<string, QuestionChange>();
  const last = new Map<string, QuestionChange>();
  for (const change of changes) {
    if (change.on !== "question") continue;
    if (!first.has(change.question.id)) first.set(change.question.id, change);
    last.set(change.question.id, change);
  }
  return diffBoards(before, after).map((change) => {
    if (change.on !== "question") return change;
    // How a question that opens was closed before, how one that closes goes now.
    const like = (change.isOpen ? first : last).get(change.question.id);
    return like?.isWithdrawn ? { ...change, isWithdrawn: true } : change;
  });
}

/** What a sorting did to the board. The questions that it does not ask any more were not answered. */
export function stepsOfSorting(before: Board, after: Board): Change[] {
  return diffBoards(before, after).map((change) =>
    change.on === "question" ? { ...change, isWithdrawn: true } : change,
  );
}

function diffGrid({ grid: was }: Board, { grid: is }: Board): Change[] {
  if (was.rows === is.rows && was.columns === is.columns) return [];
  const before = { rows: was.rows, columns: was.columns };
  return [{ on: "grid", before, after: { rows: is.rows, columns: is.columns } }];
}

function diffQuestions(before: Board, after: Board): Change[] {
  const was = new Set(before.questions.map(({ id }) => id));
  const is = new Set(after.questions.map(({ id }) => id));
  return [
    ...before.questions.filter(({ id }) => !is.has(id)).map((question) => questionChange(question, false)),
    ...after.questions.filter(({ id }) => !was.has(id)).map((question) => questionChange(question, true)),
  ];
}

function questionChange(question: Board["questions"][number], isOpen: boolean): Change {
  return { on: "question", question, isOpen };
}
