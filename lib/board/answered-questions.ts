import { applyChanges, type Change } from "@/lib/board/changes";
import { framesOf, type Place } from "@/lib/board/look-up";
import { isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { Board, BoardFrame, BoardQuestion, BoardStack } from "@/lib/board/model";
import { questionTile } from "@/lib/board/question-tile";
import { placeOfName } from "@/lib/board/tile-name";
import { isGathered } from "@/lib/sorting/gathered-key";
import type { AnswerAction } from "@/lib/sorting/types";

/**
 * Closes the open questions that changes answer by the way, or leave without meaning: nobody is asked what has just
 * been decided by hand. A question goes where
 * - one of its stacks is gone (of many doubts gathered into one question, all of them are gone or elsewhere);
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
  const doing: Doing = { before: lookedUp(board), after: lookedUp(after), ...namedIn(changes) };
  return after.questions
    .filter((question) => isAnswered(question, doing))
    .map((question) => ({
      on: "question",
      question,
      isOpen: false,
      // Nobody has said that the place stays empty: should the stack leave again, the next sorting asks again. And
      // whoever puts a frame or a stack where it does not belong once more is asked once more.
      ...(question.kind === "hole" || isMeasuredQuestion(question) ? { isWithdrawn: true } : {}),
    }));
}

/** Hundreds of questions are asked of it for every command. */
interface LookedUp {
  readonly board: Board;
  readonly frames: ReadonlyMap<string, BoardFrame>;
  readonly stacks: ReadonlyMap<string, BoardStack>;
}

function lookedUp(board: Board): LookedUp {
  return {
    board,
    frames: new Map(board.frames.map((frame) => [frame.id, frame])),
    stacks: new Map(board.stacks.map((stack) => [stack.id, stack])),
  };
}

interface Doing {
  readonly before: LookedUp;
  readonly after: LookedUp;
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
  // One of many doubts: the others are still to be answered.
  if (isGathered(question.key)) return stackIds.every((id) => !doing.after.stacks.has(id) || doing.placed.has(id));
  if (stackIds.some((id) => !doing.after.stacks.has(id))) return true;
  if (frameIds.length > 0 && frameIds.every((id) => doing.decidedFrames.has(id))) return true;
  if (answers.some(({ action }) => isDone(doing.after, action) && !isDone(doing.before, action))) return true;
  return isWithoutMeaning(question, doing);
}

function isWithoutMeaning(question: BoardQuestion, { before, after, placed }: Doing): boolean {
  const { kind, stackIds } = question;
  switch (kind) {
    case "hole": {
      const tile = questionTile(question, before.stacks);
      const hole = tile === null ? null : placeOfName(tile);
      return [...placed.values()].some((at) => at && at.row === hole?.row && at.column === hole.column);
    }
    case "few-frames": {
      const { least } = after.board.grid.framesPerTile;
      return (
        stackIds.every((id) => inUse(after.board, id) >= least) &&
        stackIds.some((id) => inUse(before.board, id) < least)
      );
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
function isDone({ frames, stacks }: LookedUp, action: AnswerAction): boolean {
  const all = (ids: readonly string[], holds: (frame: BoardFrame) => boolean) =>
    ids.flatMap((id) => frames.get(id) ?? []).every(holds);
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
      return stacks.get(action.stackId)?.isChosenTake === true;
    case "merge-stacks":
      return action.stackIds.filter((id) => stacks.has(id)).length < 2;
    case "split-stack":
      return all([action.atFrameId], ({ stackId }) => stackId !== action.stackId);
    case "new-stack": {
      const held = new Set(action.frameIds.flatMap((id) => frames.get(id) ?? []).map(({ stackId }) => stackId));
      return held.size === 1 && !held.has(null);
    }
    case "take-out":
      return action.stackIds.flatMap((id) => stacks.get(id) ?? []).every(({ row }) => row === null);
  }
}
