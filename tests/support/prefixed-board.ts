import type { Board } from "@/lib/board/model";

/** As long as real ids, for the size of the board's answer. */
const ID_LENGTH = 36;

/** Ids are the same in every made board, but unique over all projects of a database. */
export function prefixed(board: Board, prefix: string): Board {
  const longId = (id: string) => `${prefix}-${id}-`.padEnd(ID_LENGTH, "0");
  return {
    ...board,
    stacks: board.stacks.map((stack) => ({
      ...stack,
      id: longId(stack.id),
      referenceId: stack.referenceId === null ? null : longId(stack.referenceId),
    })),
    frames: board.frames.map((frame) => ({
      ...frame,
      id: longId(frame.id),
      stackId: frame.stackId === null ? null : longId(frame.stackId),
      files: frame.files.map((file) => ({ ...file, id: longId(file.id) })),
    })),
    seams: board.seams.map((seam) => ({
      ...seam,
      stackId: longId(seam.stackId),
      neighbourId: longId(seam.neighbourId),
    })),
    questions: board.questions.map((question) => ({
      ...question,
      id: longId(question.id),
      frameIds: question.frameIds.map(longId),
      stackIds: question.stackIds.map(longId),
      answers: question.answers.map(({ label, action }) => ({
        label,
        action:
          action.type === "move-frames"
            ? {
                ...action,
                frameIds: action.frameIds.map(longId),
                toStackId: action.toStackId && longId(action.toStackId),
              }
            : action,
      })),
    })),
  };
}
