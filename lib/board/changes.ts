import type { Board, BoardFrame, BoardQuestion, BoardSeam, BoardStack } from "@/lib/board/model";

/** What of a frame a command may change. */
export type FramePatch = Partial<
  Pick<BoardFrame, "stackId" | "setAside" | "placedBy" | "relativeSharpness" | "shift" | "confidence" | "reason">
>;

/** What of a stack a command may change, or a measurement (position, spot). */
export type StackPatch = Partial<Omit<BoardStack, "id">>;

/**
 * One step from a board to the next, with what was there before: so it can be checked, recorded and taken back.
 * `line` shifts every stack at or beyond the line by one; it carries no ids because it holds for all stacks alike.
 * `seams` exchanges what was measured between pairs of stacks: those of `before` go, those of `after` come.
 */
export type Change =
  | { readonly on: "frame"; readonly id: string; readonly before: FramePatch; readonly after: FramePatch }
  | { readonly on: "stack"; readonly id: string; readonly before: StackPatch; readonly after: StackPatch }
  | { readonly on: "new-stack"; readonly stack: BoardStack }
  | { readonly on: "no-stack"; readonly stack: BoardStack }
  | { readonly on: "line"; readonly axis: "row" | "column"; readonly at: number; readonly by: 1 | -1 }
  | { readonly on: "grid"; readonly before: GridSize; readonly after: GridSize }
  | QuestionChange
  | { readonly on: "seams"; readonly before: readonly BoardSeam[]; readonly after: readonly BoardSeam[] };

/** A question is asked or goes: answered, or withdrawn by the sorting, which may ask it again. */
export interface QuestionChange {
  readonly on: "question";
  readonly question: BoardQuestion;
  readonly isOpen: boolean;
  /** It goes (or came, where the change is inverted) without anybody's answer. */
  readonly isWithdrawn?: boolean;
}

export interface GridSize {
  readonly rows: number;
  readonly columns: number;
}

/** The board is not as the change expects it: somebody has changed the same thing since. */
export class ChangeConflict extends Error {
  constructor(
    message: string,
    /** The frame, stack or question that is in the way, or "grid"; "" where nobody's step is. */
    readonly subjectId: string,
  ) {
    super(message);
    this.name = "ChangeConflict";
  }
}

/**
 * Fields that must still be what the change saw, and what to say where they are not; all else is measured anew and may
 * be overwritten.
 */
const DECIDED_OF_FRAME = {
  stackId: "It has been moved since.",
  setAside: "It has been set aside or brought back since.",
} as const;
const DECIDED_OF_STACK = {
  row: "It has another place now.",
  column: "It has another place now.",
  take: "It is another take now.",
  isChosenTake: "Another take has been chosen since.",
  referenceId: "It has another reference now.",
  isSettled: "Its settled mark has been changed since.",
  shareUserId: "It has been given to somebody else since.",
} as const;

/**
 * The board after the changes; the one given stays as it is.
 * @throws ChangeConflict where the board is not what a change expects; nothing is applied then
 */
export function applyChanges(board: Board, changes: readonly Change[]): Board {
  const draft = {
    frames: new Map(board.frames.map((frame) => [frame.id, frame])),
    stacks: new Map(board.stacks.map((stack) => [stack.id, stack])),
    questions: new Map(board.questions.map((question) => [question.id, question])),
    seams: new Map(board.seams.map((seam) => [seamKey(seam), seam])),
    grid: board.grid,
  };
  for (const change of changes) applyChange(draft, change);
  requireOneStackAPlace(draft.stacks);
  return {
    ...board,
    grid: draft.grid,
    frames: [...draft.frames.values()],
    // By id: the same board whatever way led to it.
    stacks: [...draft.stacks.values()].sort((a, b) => (a.id < b.id ? -1 : 1)),
    questions: [...draft.questions.values()].sort((a, b) => b.severity - a.severity || (a.key < b.key ? -1 : 1)),
    seams: [...draft.seams.entries()].sort(([a], [b]) => (a < b ? -1 : 1)).map(([, seam]) => seam),
  };
}

/** The changes that take these back, in the order to be applied. */
export function invertChanges(changes: readonly Change[]): Change[] {
  return changes.map(invertChange).reverse();
}

interface Draft {
  readonly frames: Map<string, BoardFrame>;
  readonly stacks: Map<string, BoardStack>;
  readonly questions: Map<string, BoardQuestion>;
  readonly seams: Map<string, BoardSeam>;
  grid: Board["grid"];
}

function applyChange(draft: Draft, change: Change): void {
  switch (change.on) {
    case "frame": {
      const frame = draft.frames.get(change.id);
      if (!frame) throw new ChangeConflict("A frame is no longer there.", change.id);
      expectSame(frame, change.before, DECIDED_OF_FRAME, change.id);
      draft.frames.set(change.id, { ...frame, ...change.after });
      return;
    }
    case "stack": {
      const stack = draft.stacks.get(change.id);
      if (!stack) throw new ChangeConflict("A stack is no longer there.", change.id);
      expectSame(stack, change.before, DECIDED_OF_STACK, change.id);
      draft.stacks.set(change.id, { ...stack, ...change.after });
      return;
    }
    case "new-stack":
      if (draft.stacks.has(change.stack.id)) throw new ChangeConflict("This stack is there already.", change.stack.id);
      draft.stacks.set(change.stack.id, change.stack);
      return;
    case "no-stack": {
      const { id } = change.stack;
      if (!draft.stacks.has(id)) throw new ChangeConflict("A stack is no longer there.", id);
      if (isHeld(draft, id)) throw new ChangeConflict("Other frames have come into this stack.", id);
      draft.stacks.delete(id);
      return;
    }
    case "line":
      shiftLine(draft, change);
      return;
    case "grid":
      if (draft.grid.rows !== change.before.rows || draft.grid.columns !== change.before.columns) {
        throw new ChangeConflict("The grid has other rows or columns now.", "grid");
      }
      draft.grid = { ...draft.grid, ...change.after };
      return;
    case "question":
      if (draft.questions.has(change.question.id) === change.isOpen) {
        throw new ChangeConflict(
          change.isOpen ? "This question is open already." : "This question is settled already.",
          change.question.id,
        );
      }
      if (change.isOpen) draft.questions.set(change.question.id, change.question);
      else draft.questions.delete(change.question.id);
      return;
    case "seams":
      for (const seam of change.before) draft.seams.delete(seamKey(seam));
      for (const seam of change.after) draft.seams.set(seamKey(seam), seam);
  }
}

function isHeld({ frames }: Draft, stackId: string): boolean {
  for (const frame of frames.values()) if (frame.stackId === stackId) return true;
  return false;
}

/** Two stacks have one seam each way round at the most. */
export function seamKey({ stackId, neighbourId }: Pick<BoardSeam, "stackId" | "neighbourId">): string {
  return `${stackId} ${neighbourId}`;
}

function shiftLine(draft: Draft, { axis, at, by }: Extract<Change, { on: "line" }>): void {
  const size = axis === "row" ? "rows" : "columns";
  for (const stack of draft.stacks.values()) {
    const place = stack[axis];
    if (place === null || place < at) continue;
    if (by < 0 && place === at) throw new ChangeConflict("This line is not empty any more.", stack.id);
    draft.stacks.set(stack.id, { ...stack, [axis]: place + by });
  }
  draft.grid = { ...draft.grid, [size]: draft.grid[size] + by };
}

function expectSame<Entity, Field extends keyof Entity & string>(
  present: Entity,
  before: Partial<Entity>,
  decided: Readonly<Record<Field, string>>,
  id: string,
): void {
  for (const field in decided) {
    if (field in before && before[field] !== present[field]) throw new ChangeConflict(decided[field], id);
  }
}

function requireOneStackAPlace(stacks: ReadonlyMap<string, BoardStack>): void {
  const taken = new Map<string, string>();
  for (const stack of stacks.values()) {
    if (stack.row === null || stack.column === null) continue;
    const place = `${stack.row}/${stack.column}/${stack.take}`;
    if (taken.has(place)) throw new ChangeConflict("Another stack has this place now.", stack.id);
    taken.set(place, stack.id);
  }
}

function invertChange(change: Change): Change {
  switch (change.on) {
    case "frame":
      return { ...change, before: change.after, after: change.before };
    case "stack":
      return { ...change, before: change.after, after: change.before };
    case "new-stack":
      return { ...change, on: "no-stack" };
    case "no-stack":
      return { ...change, on: "new-stack" };
    case "line":
      return { ...change, by: change.by === 1 ? -1 : 1 };
    case "grid":
      return { ...change, before: change.after, after: change.before };
    case "seams":
      return { ...change, before: change.after, after: change.before };
    case "question":
      return { ...change, isOpen: !change.isOpen };
  }
}
