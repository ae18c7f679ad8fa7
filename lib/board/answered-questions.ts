import { applyChanges, type Change } from "@/lib/board/changes";
import { framesOf, type Place } from "@/lib/board/look-up";
import type { Board, BoardQuestion } from "@/lib/board/model";
import { questionTile } from "@/lib/board/question-tile";
import { placeOfName } from "@/lib/board/tile-name";
import type { AnswerAction } from "@/lib/sorting/types";

/**
 * Closes the open questions that changes answer by the way, or leave without meaning: nobody is asked what has just
 * been decided by hand. A question goes where
 * - one of its stacks is gone;
 * - what one of its answers would do has been done;
 * - all frames that it is about have been moved, set aside or brought back, whatever it proposed;
 * - it asks about a hole and a stack was put there; about too few frames and there are enough now; about two stacks'
 *   seam or takes and one of them has another place.
 * @param board - before the changes
 * @throws ChangeConflict where the changes do not apply
 */
export function closeAnswered(board: Board, changes: readonly Change[]): Change[] {
  if (changes.length === 0 || board.questions.length === 0) return [];
  const after = applyChanges(board, changes);
  const doing: Doing = {
    before: board,
    after,
    ...namedIn(changes),
    stackIds: new Set(after.stacks.map(({ id }) => id)),
  };
  return after.questions
    .filter((question) => isAnswered(question, doing))
    .map((question) => ({
      on: "question",
      question,
      isOpen: false,
      // Nobody has said that the place stays empty: should the stack leave again, the next sorting asks again.
      ...(question.kind === "hole" ? { isWithdrawn: true } : {}),
    }));
}

interface Doing {
  readonly before: Board;
  readonly after: Board;
  /** Ids of the stacks after. */
  readonly stackIds: ReadonlySet<string>;
  /** Moved, set aside or brought back. */
  readonly decidedFrames: ReadonlySet<string>;
  /** Put at another place, or made there. */
  readonly placed: ReadonlyMap<string, Place | null>;
}

function namedIn(changes: readonly Change[]): Pick<Doing, "decidedFrames" | "placed"> {
  const decidedFrames = new Set<string>();
  const placed = new Map<string, Place | null>();
  for (const change of changes) {
    if (change.on === "frame" && ("stackId" in change.after || "setAside" in change.after))
      decidedFrames.add(change.id);
    if (change.on === "stack" && "row" in change.after) placed.set(change.id, placeOf(change.after));
    if (change.on === "new-stack") placed.set(change.stack.id, placeOf(change.stack));
  }
  return { decidedFrames, placed };
}

function placeOf({ row = null, column = null }: { row?: number | null; column?: number | null }): Place | null {
  return row === null || column === null ? null : { row, column };
}

function isAnswered(question: BoardQuestion, doing: Doing): boolean {
  const { frameIds, stackIds, answers } = question;
  if (stackIds.some((id) => !doing.stackIds.has(id))) return true;
  if (frameIds.length > 0 && frameIds.every((id) => doing.decidedFrames.has(id))) return true;
  if (answers.some(({ action }) => isDone(doing.after, action) && !isDone(doing.before, action))) return true;
  return isWithoutMeaning(question, doing);
}

function isWithoutMeaning(question: BoardQuestion, { before, after, placed }: Doing): boolean {
  const { kind, stackIds } = question;
  switch (kind) {
    case "hole": {
      const tile = questionTile(question, new Map(before.stacks.map((stack) => [stack.id, stack])));
      const hole = tile === null ? null : placeOfName(tile);
      return [...placed.values()].some((at) => at && at.row === hole?.row && at.column === hole.column);
    }
    case "few-frames": {
      const { least } = after.grid.framesPerTile;
      return stackIds.every((id) => inUse(after, id) >= least) && stackIds.some((id) => inUse(before, id) < least);
    }
    case "thin-seam":
    case "retake":
      return stackIds.some((id) => placed.has(id));
    default:
      return false;
  }
}

function inUse(board: Board, stackId: string): number {
  return framesOf(board, stackId).filter(({ setAside }) => setAside === null).length;
}

/** Whether the board is as this answer would make it. Keeping is never done by the way: it must be said. */
function isDone(board: Board, action: AnswerAction): boolean {
  const all = (ids: readonly string[], holds: (frame: Board["frames"][number]) => boolean) => {
    const asked = new Set(ids);
    return board.frames.every((frame) => !asked.has(frame.id) || holds(frame));
  };
  switch (action.type) {
    case "keep":
      return false;
    case "move-frames":
      return all(action.frameIds, ({ stackId }) => stackId === action.toStackId);
    case "set-aside":
      return all(action.frameIds, ({ setAside }) => setAside !== null);
    case "bring-back":
      return all(action.frameIds, ({ setAside }) => setAside === null);
    case "choose-take":
      return board.stacks.some(({ id, isChosenTake }) => id === action.stackId && isChosenTake);
    case "merge-stacks":
      return board.stacks.filter(({ id }) => action.stackIds.includes(id)).length < 2;
    case "split-stack":
      return all([action.atFrameId], ({ stackId }) => stackId !== action.stackId);
    case "new-stack": {
      const held = new Set(board.frames.flatMap(({ id, stackId }) => (action.frameIds.includes(id) ? [stackId] : [])));
      return held.size === 1 && !held.has(null);
    }
    case "take-out":
      return board.stacks.every(({ id, row }) => !action.stackIds.includes(id) || row === null);
  }
}
