import { ChangeConflict, type Change, type FramePatch } from "@/lib/board/changes";
import type { CommandOf } from "@/lib/board/command-schema";
import {
  freeTake,
  frameOf,
  framesNamed,
  framesOf,
  othersAt,
  sharpestInUse,
  stackOf,
  stacksAt,
  type Place,
} from "@/lib/board/look-up";
import type { Board, BoardFrame, BoardStack } from "@/lib/board/model";
import { growTo } from "@/lib/board/plan-places";
import type { SetAsideReason } from "@/lib/sorting/types";

export function planMove(board: Board, { frameIds, to, expect }: CommandOf<"move-frames">): Change[] {
  const frames = framesNamed(board, frameIds);
  expectPlaces(frames, expect);
  if (to.kind === "loose") return moveTo(board, frames, null);
  if (to.kind === "stack") return moveTo(board, frames, stackOf(board, to.stackId).id);
  return moveToNew(board, frames, to.stackId, to.place);
}

export function planSplit(board: Board, command: CommandOf<"split-stack">): Change[] {
  const frames = framesOf(board, stackOf(board, command.stackId).id);
  expectPlaces(frames, command.expect);
  const from = frames.findIndex(({ id }) => id === command.atFrameId);
  if (from < 0) throw new ChangeConflict("This frame is no longer in the stack.", command.atFrameId);
  if (from === 0) throw new ChangeConflict("A stack is split after its first frame.", command.atFrameId);
  return moveToNew(board, frames.slice(from), command.newStackId, command.place);
}

export function planMerge(board: Board, { intoStackId, stackIds, expect }: CommandOf<"merge-stacks">): Change[] {
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
export function moveTo(board: Board, frames: readonly BoardFrame[], toStackId: string | null): Change[] {
  const moving = frames.filter(({ stackId }) => stackId !== toStackId);
  const movingIds = new Set(moving.map(({ id }) => id));
  const moves = moving.map((frame): Change => ({ on: "frame", id: frame.id, ...movePatches(frame, toStackId) }));
  const left = new Set(moving.flatMap(({ stackId }) => (stackId === null ? [] : [stackId])));
  const held = new Set(board.frames.flatMap(({ id, stackId }) => (movingIds.has(id) ? [] : [stackId])));
  const emptied = new Set([...left].filter((stackId) => !held.has(stackId)));
  return [
    ...moves,
    ...[...left].flatMap((stackId) => afterLeaving(board, stackId, { leaving: movingIds, emptied })),
    ...(moves.length === 0 ? [] : [...unsettle(board, toStackId), ...firstReference(board, toStackId, moving)]),
  ];
}

/** A stack that had no frame in use has none as its reference: with others it may. */
function firstReference(board: Board, stackId: string | null, coming: readonly BoardFrame[]): Change[] {
  const stack = board.stacks.find(({ id }) => id === stackId);
  if (stack?.referenceId !== null) return [];
  const referenceId = sharpestInUse([...framesOf(board, stack.id), ...coming]);
  return referenceId === null ? [] : [setReference(stack, referenceId)];
}

/** What a person called settled were its frames as they were: with others it must be looked at again. */
function unsettle(board: Board, stackId: string | null): Change[] {
  const stack = board.stacks.find(({ id }) => id === stackId);
  return stack?.isSettled
    ? [{ on: "stack", id: stack.id, before: { isSettled: true }, after: { isSettled: false } }]
    : [];
}

export function moveToNew(board: Board, frames: readonly BoardFrame[], stackId: string, place: Place | null): Change[] {
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

interface Leaving {
  /** Ids of the frames that go. */
  readonly leaving: ReadonlySet<string>;
  /** Ids of the stacks that have none left. */
  readonly emptied: ReadonlySet<string>;
}

function afterLeaving(board: Board, stackId: string, { leaving, emptied }: Leaving): Change[] {
  const stack = stackOf(board, stackId);
  if (emptied.has(stackId)) return removeStack(board, stack, emptied);
  const staying = framesOf(board, stackId).filter(({ id }) => !leaving.has(id));
  const unsettled = unsettle(board, stackId);
  if (stack.referenceId === null || !leaving.has(stack.referenceId)) return unsettled;
  return [...unsettled, setReference(stack, sharpestInUse(staying))];
}

function removeStack(board: Board, stack: BoardStack, emptied: ReadonlySet<string>): Change[] {
  // Not one that goes with it.
  const others = othersAt(board, stack).filter(({ id }) => !emptied.has(id));
  const next = others.sort((a, b) => a.take - b.take)[0];
  const gone: Change = { on: "no-stack", stack };
  if (!stack.isChosenTake || !next) return [gone];
  return [gone, { on: "stack", id: next.id, before: { isChosenTake: false }, after: { isChosenTake: true } }];
}

export function planSetAside(
  board: Board,
  frameIds: readonly string[],
  setAside: SetAsideReason | null,
  expect: Readonly<Record<string, SetAsideReason | null>> | undefined,
): Change[] {
  const frames = framesNamed(board, frameIds);
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

export function planReference(board: Board, { stackId, frameId, expect }: CommandOf<"choose-reference">): Change[] {
  const stack = stackOf(board, stackId);
  const frame = frameOf(board, frameId);
  if (expect && expect.referenceId !== stack.referenceId) {
    throw new ChangeConflict("Another reference has been chosen.", stackId);
  }
  if (frame.stackId !== stackId) throw new ChangeConflict("This frame is no longer in the stack.", frameId);
  if (frame.setAside !== null) throw new ChangeConflict("A frame that is set aside cannot be the reference.", frameId);
  return stack.referenceId === frameId ? [] : [setReference(stack, frameId)];
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
