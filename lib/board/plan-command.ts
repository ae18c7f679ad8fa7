import { closeAnswered } from "@/lib/board/answered-questions";
import { ChangeConflict, type Change } from "@/lib/board/changes";
import type { CommandOf, PlannedCommand } from "@/lib/board/command-schema";
import { framesNamed, framesOf, stackOf } from "@/lib/board/look-up";
import { isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { Board } from "@/lib/board/model";
import {
  moveTo,
  moveToNew,
  planMerge,
  planMove,
  planReference,
  planSetAside,
  planSplit,
} from "@/lib/board/plan-frames";
import { planAddLine, planPlace, planRemoveLine, planTake, planTakeOut } from "@/lib/board/plan-places";
import type { AnswerAction } from "@/lib/sorting/types";

/**
 * What a command does to this board, as changes, the questions that it answers by the way included. Pure: server and
 * browser plan alike.
 * @throws ChangeConflict where what the command expects is not so (any more), or where it cannot be done
 */
export function planCommand(board: Board, command: PlannedCommand): Change[] {
  const changes = planAsked(board, command);
  return [...changes, ...closeAnswered(board, changes)];
}

function planAsked(board: Board, command: PlannedCommand): Change[] {
  switch (command.type) {
    case "move-frames":
      return planMove(board, command);
    case "split-stack":
      return planSplit(board, command);
    case "merge-stacks":
      return planMerge(board, command);
    case "place-stack":
      return planPlace(board, command);
    case "set-aside":
      return planSetAside(board, command.frameIds, command.reason, command.expect);
    case "bring-back":
      return planSetAside(board, command.frameIds, null, command.expect);
    case "choose-reference":
      return planReference(board, command);
    case "choose-take":
      return planTake(board, stackOf(board, command.stackId));
    case "add-line":
      return planAddLine(board, command);
    case "remove-line":
      return planRemoveLine(board, command);
    case "settle":
      return planSettle(board, command);
    case "assign":
      return command.stackIds.flatMap((id) => {
        const { shareUserId } = stackOf(board, id);
        if (shareUserId === command.userId) return [];
        return [{ on: "stack", id, before: { shareUserId }, after: { shareUserId: command.userId } } as const];
      });
  }
}

function planSettle(board: Board, { target }: CommandOf<"settle">): Change[] {
  if (target.kind === "stack") {
    const { id, isSettled } = stackOf(board, target.stackId);
    if (isSettled === target.isSettled) return [];
    if (target.isSettled && board.questions.some(({ stackIds }) => stackIds.includes(id))) {
      throw new ChangeConflict("This stack has open questions. Answer them first.", id);
    }
    return [{ on: "stack", id, before: { isSettled }, after: { isSettled: target.isSettled } }];
  }
  const question = board.questions.find(({ id }) => id === target.questionId);
  if (!question) throw new ChangeConflict("This question is settled already.", target.questionId);
  const action: AnswerAction = target.answer === null ? { type: "keep" } : answerOf(question, target.answer);
  // What is measured may be asked again should it come about again, unless somebody has said that it is meant so.
  const isWithdrawn = isMeasuredQuestion(question) && action.type !== "keep";
  const closing: Change = { on: "question", question, isOpen: false, ...(isWithdrawn && { isWithdrawn }) };
  return [...planAction(board, action, target.newStackId), closing];
}

function answerOf(question: Board["questions"][number], answer: number): AnswerAction {
  const chosen = question.answers[answer];
  if (!chosen) throw new ChangeConflict("This question has no such answer.", question.id);
  return chosen.action;
}

function planAction(board: Board, action: AnswerAction, newStackId: string | undefined): Change[] {
  switch (action.type) {
    case "keep":
      return [];
    case "move-frames":
      if (action.toStackId !== null) stackOf(board, action.toStackId);
      return moveTo(board, framesNamed(board, action.frameIds), action.toStackId);
    case "set-aside":
      return planSetAside(board, action.frameIds, action.reason, undefined);
    case "bring-back":
      return planSetAside(board, action.frameIds, null, undefined);
    case "choose-take":
      return planTake(board, stackOf(board, action.stackId));
    case "merge-stacks": {
      const [into, ...others] = action.stackIds.map((id) => stackOf(board, id));
      return into
        ? moveTo(
            board,
            others.flatMap(({ id }) => framesOf(board, id)),
            into.id,
          )
        : [];
    }
    case "take-out":
      return planTakeOut(board, action.stackIds);
    case "new-stack": {
      const frames = framesNamed(board, action.frameIds);
      return moveToNew(board, frames, requireId(newStackId, action.frameIds), null);
    }
    case "split-stack": {
      const frames = framesOf(board, action.stackId);
      const from = frames.findIndex(({ id }) => id === action.atFrameId);
      if (from < 1) throw new ChangeConflict("This frame is no longer in the stack.", action.atFrameId);
      return moveToNew(board, frames.slice(from), requireId(newStackId, [action.stackId]), null);
    }
  }
}

function requireId(newStackId: string | undefined, [subjectId = ""]: readonly string[]): string {
  if (newStackId === undefined) throw new ChangeConflict("The new stack needs an id.", subjectId);
  return newStackId;
}
