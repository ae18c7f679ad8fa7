import { ChangeConflict, type Change, type FramePatch } from "@/lib/board/changes";
import type { CommandOf, PlannedCommand } from "@/lib/board/command-schema";
import type { Board, BoardFrame, BoardStack } from "@/lib/board/model";
import type { AnswerAction, SetAsideReason } from "@/lib/sorting/types";

interface Place {
  readonly row: number;
  readonly column: number;
}

/**
 * What a command does to this board, as changes. Pure: server and browser plan alike.
 * @throws ChangeConflict where what the command expects is not so (any more), or where it cannot be done
 */
export function planCommand(board: Board, command: PlannedCommand): Change[] {
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

function planMove(board: Board, { frameIds, to, expect }: CommandOf<"move-frames">): Change[] {
  const frames = frameIds.map((id) => frameOf(board, id));
  expectPlaces(frames, expect);
  if (to.kind === "loose") return moveTo(board, frames, null);
  if (to.kind === "stack") return moveTo(board, frames, stackOf(board, to.stackId).id);
  return moveToNew(board, frames, to.stackId, to.place);
}

function planSplit(board: Board, command: CommandOf<"split-stack">): Change[] {
  const frames = framesOf(board, stackOf(board, command.stackId).id);
  expectPlaces(frames, command.expect);
  const from = frames.findIndex(({ id }) => id === command.atFrameId);
  if (from < 0) throw new ChangeConflict("This frame is no longer in the stack.", command.atFrameId);
  if (from === 0) throw new ChangeConflict("A stack is split after its first frame.", command.atFrameId);
  return moveToNew(board, frames.slice(from), command.newStackId, command.place);
}

function planMerge(board: Board, { intoStackId, stackIds, expect }: CommandOf<"merge-stacks">): Change[] {
  const into = stackOf(board, intoStackId);
  const others = stackIds.map((id) => stackOf(board, id));
  if (others.some(({ id }) => id === into.id)) {
    throw new ChangeConflict("A stack cannot be merged into itself.", into.id);
  }
  const frames = others.flatMap(({ id }) => framesOf(board, id));
  expectPlaces(frames, expect);
  return moveTo(board, frames, into.id);
}

/** Frames into a stack that is there, or loose; stacks that this leaves empty go, and their tile's next take is chosen. */
function moveTo(board: Board, frames: readonly BoardFrame[], toStackId: string | null): Change[] {
  const moving = frames.filter(({ stackId }) => stackId !== toStackId);
  const movingIds = new Set(moving.map(({ id }) => id));
  const moves = moving.map((frame): Change => ({ on: "frame", id: frame.id, ...movePatches(frame, toStackId) }));
  const left = new Set(moving.flatMap(({ stackId }) => (stackId === null ? [] : [stackId])));
  return [...moves, ...[...left].flatMap((stackId) => afterLeaving(board, stackId, movingIds))];
}

function moveToNew(board: Board, frames: readonly BoardFrame[], stackId: string, place: Place | null): Change[] {
  if (board.stacks.some(({ id }) => id === stackId)) throw new ChangeConflict("This stack is there already.", stackId);
  const there = place === null ? [] : stacksAt(board, place);
  const stack: BoardStack = {
    id: stackId,
    row: place?.row ?? null,
    column: place?.column ?? null,
    take: freeTake(there),
    isChosenTake: there.length === 0,
    referenceId: sharpestInUse(frames),
    isSettled: false,
    shareUserId: null,
    confidence: 1,
    reason: "Made by a person.",
    position: null,
    spot: { x: 0.5, y: 0.5 },
    placedBy: "person",
  };
  const changes = moveTo(board, frames, stackId);
  return [{ on: "new-stack", stack }, ...changes, ...growTo(board, place)];
}

function movePatches(frame: BoardFrame, stackId: string | null): { before: FramePatch; after: FramePatch } {
  const { placedBy, relativeSharpness, shift, confidence, reason } = frame;
  return {
    before: { stackId: frame.stackId, placedBy, relativeSharpness, shift, confidence, reason },
    // Measured against the new stack by the worker; until then nothing is claimed.
    after: {
      stackId,
      placedBy: "person",
      relativeSharpness: null,
      shift: null,
      confidence: 1,
      reason: stackId === null ? "Taken out by a person." : "Put here by a person.",
    },
  };
}

function afterLeaving(board: Board, stackId: string, leaving: ReadonlySet<string>): Change[] {
  const stack = stackOf(board, stackId);
  const staying = framesOf(board, stackId).filter(({ id }) => !leaving.has(id));
  if (staying.length === 0) return removeStack(board, stack);
  if (stack.referenceId === null || !leaving.has(stack.referenceId)) return [];
  return [setReference(stack, sharpestInUse(staying))];
}

function removeStack(board: Board, stack: BoardStack): Change[] {
  const next = othersAt(board, stack).sort((a, b) => a.take - b.take)[0];
  const gone: Change = { on: "no-stack", stack };
  if (!stack.isChosenTake || !next) return [gone];
  return [gone, { on: "stack", id: next.id, before: { isChosenTake: false }, after: { isChosenTake: true } }];
}

function planPlace(board: Board, { stackId, place, occupied, expect }: CommandOf<"place-stack">): Change[] {
  const stack = stackOf(board, stackId);
  if (expect && (expect.row !== stack.row || expect.column !== stack.column || expect.take !== stack.take)) {
    throw new ChangeConflict("The stack has another place now.", stackId);
  }
  if (place === null) return stack.row === null ? [] : leavePlace(board, stack, { row: null, column: null, take: 1 });
  const there = stacksAt(board, place).filter(({ id }) => id !== stackId);
  if (stack.row === place.row && stack.column === place.column) return [];
  if (there.length === 0) return [...leavePlace(board, stack, { ...place, take: 1 }), ...growTo(board, place)];
  switch (occupied) {
    case "refuse":
      throw new ChangeConflict("Another stack has this place now.", there[0]?.id ?? stackId);
    case "take":
      return leavePlace(board, stack, { ...place, take: freeTake(there) }, false);
    case "swap":
      return planSwap(board, stack, there);
    case "push":
      return planPush(board, stack, place);
  }
}

/** Both places' stacks change over, all takes of each. A stack without a place sends the others out of the grid. */
function planSwap(board: Board, stack: BoardStack, there: readonly BoardStack[]): Change[] {
  const target = { row: there[0]?.row ?? null, column: there[0]?.column ?? null };
  if (stack.row === null) {
    return [
      ...there.map((other) => placeChange(other, { row: null, column: null, take: 1 }, true)),
      placeChange(stack, { ...target, take: 1 }, true),
    ];
  }
  const own = [stack, ...othersAt(board, stack)];
  const back = { row: stack.row, column: stack.column };
  return [
    ...own.map((each) => placeChange(each, { ...target, take: each.take }, each.isChosenTake)),
    ...there.map((each) => placeChange(each, { ...back, take: each.take }, each.isChosenTake)),
  ];
}

/** The stacks from this place to the right go one column on, as far as the first free place. */
function planPush(board: Board, stack: BoardStack, place: Place): Change[] {
  const pushed: Change[] = [];
  let column = place.column;
  for (;;) {
    const there = stacksAt(board, { row: place.row, column }).filter(({ id }) => id !== stack.id);
    if (there.length === 0) break;
    for (const each of there) {
      pushed.push(placeChange(each, { row: place.row, column: column + 1, take: each.take }, each.isChosenTake));
    }
    column += 1;
  }
  const own = leavePlace(board, stack, { ...place, take: 1 });
  return [...pushed, ...own, ...growTo(board, { row: place.row, column })];
}

/** A stack goes elsewhere; where it was the chosen take, the next one is chosen. */
function leavePlace(
  board: Board,
  stack: BoardStack,
  to: { row: number | null; column: number | null; take: number },
  isChosenTake = true,
): Change[] {
  const next = othersAt(board, stack).sort((a, b) => a.take - b.take)[0];
  const own = placeChange(stack, to, isChosenTake);
  if (!stack.isChosenTake || !next) return [own];
  return [own, { on: "stack", id: next.id, before: { isChosenTake: false }, after: { isChosenTake: true } }];
}

function placeChange(
  stack: BoardStack,
  to: { row: number | null; column: number | null; take: number },
  isChosenTake: boolean,
): Change {
  const { row, column, take, placedBy, confidence, reason } = stack;
  return {
    on: "stack",
    id: stack.id,
    before: { row, column, take, isChosenTake: stack.isChosenTake, placedBy, confidence, reason },
    after: { ...to, isChosenTake, placedBy: "person", confidence: 1, reason: "Placed by a person." },
  };
}

function planSetAside(
  board: Board,
  frameIds: readonly string[],
  setAside: SetAsideReason | null,
  expect: Readonly<Record<string, SetAsideReason | null>> | undefined,
): Change[] {
  const frames = frameIds.map((id) => frameOf(board, id));
  for (const frame of frames) {
    const seen = expect?.[frame.id];
    if (seen !== undefined && seen !== frame.setAside) {
      throw new ChangeConflict(frame.setAside === null ? "It is in use again." : "It is set aside already.", frame.id);
    }
  }
  const changing = frames.filter((frame) => frame.setAside !== setAside);
  const changes = changing.map((frame): Change => ({
    on: "frame",
    id: frame.id,
    before: { setAside: frame.setAside, placedBy: frame.placedBy },
    after: { setAside, placedBy: "person" },
  }));
  const touched = new Set(changing.flatMap(({ stackId }) => (stackId === null ? [] : [stackId])));
  const changed = new Set(changing.map(({ id }) => id));
  return [
    ...changes,
    ...[...touched].flatMap((stackId) => mendReference(board, stackOf(board, stackId), changed, setAside)),
  ];
}

/** A reference must be in use: where it is set aside, or there was none, the sharpest in use takes its place. */
function mendReference(
  board: Board,
  stack: BoardStack,
  changed: ReadonlySet<string>,
  setAside: SetAsideReason | null,
): Change[] {
  const inUse = framesOf(board, stack.id).filter((frame) =>
    changed.has(frame.id) ? setAside === null : frame.setAside === null,
  );
  if (inUse.some(({ id }) => id === stack.referenceId)) return [];
  const next = sharpestInUse(inUse.map((frame) => ({ ...frame, setAside: null })));
  return next === stack.referenceId ? [] : [setReference(stack, next)];
}

function planReference(board: Board, { stackId, frameId, expect }: CommandOf<"choose-reference">): Change[] {
  const stack = stackOf(board, stackId);
  const frame = frameOf(board, frameId);
  if (expect && expect.referenceId !== stack.referenceId) {
    throw new ChangeConflict("Another reference has been chosen.", stackId);
  }
  if (frame.stackId !== stackId) throw new ChangeConflict("This frame is no longer in the stack.", frameId);
  if (frame.setAside !== null) throw new ChangeConflict("A frame that is set aside cannot be the reference.", frameId);
  return stack.referenceId === frameId ? [] : [setReference(stack, frameId)];
}

function planTake(board: Board, stack: BoardStack): Change[] {
  if (stack.isChosenTake) return [];
  const others = othersAt(board, stack).filter(({ isChosenTake }) => isChosenTake);
  return [stack, ...others].map(({ id, isChosenTake }) => ({
    on: "stack",
    id,
    before: { isChosenTake },
    after: { isChosenTake: !isChosenTake },
  }));
}

function planAddLine(board: Board, { axis, at }: CommandOf<"add-line">): Change[] {
  const lines = axis === "row" ? board.grid.rows : board.grid.columns;
  if (at > lines + 1) throw new ChangeConflict("There is no such line.", "grid");
  return [{ on: "line", axis, at, by: 1 }];
}

function planRemoveLine(board: Board, { axis, at }: CommandOf<"remove-line">): Change[] {
  const lines = axis === "row" ? board.grid.rows : board.grid.columns;
  if (at > lines) throw new ChangeConflict("There is no such line.", "grid");
  const held = board.stacks.find((stack) => stack[axis] === at);
  if (held) throw new ChangeConflict("Only an empty line can be removed. Move its stacks first.", held.id);
  return [{ on: "line", axis, at, by: -1 }];
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
  return [...planAction(board, action, target.newStackId), { on: "question", question, isOpen: false }];
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
      return moveTo(
        board,
        action.frameIds.map((id) => frameOf(board, id)),
        action.toStackId,
      );
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
    case "split-stack": {
      if (newStackId === undefined) throw new ChangeConflict("The new stack needs an id.", action.stackId);
      const frames = framesOf(board, action.stackId);
      const from = frames.findIndex(({ id }) => id === action.atFrameId);
      if (from < 1) throw new ChangeConflict("This frame is no longer in the stack.", action.atFrameId);
      return moveToNew(board, frames.slice(from), newStackId, null);
    }
  }
}

function growTo(board: Board, place: Place | null): Change[] {
  if (place === null) return [];
  const { rows, columns } = board.grid;
  const after = { rows: Math.max(rows, place.row), columns: Math.max(columns, place.column) };
  return after.rows === rows && after.columns === columns ? [] : [{ on: "grid", before: { rows, columns }, after }];
}

function setReference({ id, referenceId }: BoardStack, next: string | null): Change {
  return { on: "stack", id, before: { referenceId }, after: { referenceId: next } };
}

function expectPlaces(
  frames: readonly BoardFrame[],
  expect: Readonly<Record<string, string | null>> | undefined,
): void {
  for (const frame of frames) {
    const seen = expect?.[frame.id];
    if (seen !== undefined && seen !== frame.stackId) throw new ChangeConflict("It has been moved since.", frame.id);
  }
}

function sharpestInUse(frames: readonly BoardFrame[]): string | null {
  const inUse = frames.filter(({ setAside }) => setAside === null);
  // Within one stack the scores compare; among frames of several, the plain variance has to do.
  const score = (frame: BoardFrame) => frame.laplacianVariance;
  return (
    inUse.reduce<BoardFrame | null>((best, frame) => (best && score(best) >= score(frame) ? best : frame), null)?.id ??
    null
  );
}

function stacksAt(board: Board, { row, column }: Place): BoardStack[] {
  return board.stacks.filter((stack) => stack.row === row && stack.column === column);
}

function othersAt(board: Board, stack: BoardStack): BoardStack[] {
  if (stack.row === null || stack.column === null) return [];
  return stacksAt(board, { row: stack.row, column: stack.column }).filter(({ id }) => id !== stack.id);
}

function freeTake(there: readonly BoardStack[]): number {
  return Math.max(0, ...there.map(({ take }) => take)) + 1;
}

function framesOf(board: Board, stackId: string): BoardFrame[] {
  return board.frames.filter((frame) => frame.stackId === stackId).sort((a, b) => a.orderTaken - b.orderTaken);
}

function frameOf(board: Board, id: string): BoardFrame {
  const frame = board.frames.find((each) => each.id === id);
  if (!frame) throw new ChangeConflict("There is no such frame in this project.", id);
  return frame;
}

function stackOf(board: Board, id: string): BoardStack {
  const stack = board.stacks.find((each) => each.id === id);
  if (!stack) throw new ChangeConflict("This stack is no longer there.", id);
  return stack;
}
