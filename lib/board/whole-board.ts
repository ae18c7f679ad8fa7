import { ChangeConflict } from "@/lib/board/changes";
import type { Board, BoardFrame, BoardQuestion, BoardStack } from "@/lib/board/model";

/**
 * What must hold of every board, whatever led to it: each frame lies in a stack that is there, or loose; each stack has
 * frames, its reference is one of them and in use (none where none is in use); each tile has one chosen take; the grid
 * holds every stack; a settled stack has no open question; questions are about what is there.
 * @param before - what is wrong there already is not held against what was done since
 * @throws ChangeConflict on the frame, stack or question where it does not hold
 */
export function requireWholeBoard(before: Board, after: Board): void {
  const faults = faultsOf(after);
  if (faults.length === 0) return;
  const known = new Set(faultsOf(before).map(keyOf));
  const fault = faults.find((each) => !known.has(keyOf(each)));
  if (fault) throw new ChangeConflict(fault.message, fault.subjectId);
}

interface Fault {
  readonly message: string;
  readonly subjectId: string;
}

function keyOf({ message, subjectId }: Fault): string {
  return `${message} ${subjectId}`;
}

/** A board, looked up by what lies where. */
export interface BoardLookUp {
  readonly board: Board;
  readonly stacks: ReadonlyMap<string, BoardStack>;
  readonly frames: ReadonlyMap<string, BoardFrame>;
  readonly framesOf: ReadonlyMap<string, readonly BoardFrame[]>;
  /** Stacks that lie at one place, by place. */
  readonly takesAt: ReadonlyMap<string, readonly BoardStack[]>;
}

export function lookUp(board: Board): BoardLookUp {
  const framesOf = new Map<string, BoardFrame[]>();
  for (const frame of board.frames) if (frame.stackId !== null) pushTo(framesOf, frame.stackId, frame);
  const takesAt = new Map<string, BoardStack[]>();
  for (const stack of board.stacks) if (stack.row !== null) pushTo(takesAt, placeOf(stack), stack);
  return {
    board,
    stacks: new Map(board.stacks.map((stack) => [stack.id, stack])),
    frames: new Map(board.frames.map((frame) => [frame.id, frame])),
    framesOf,
    takesAt,
  };
}

function pushTo<Item>(lists: Map<string, Item[]>, key: string, item: Item): void {
  const list = lists.get(key);
  if (list) list.push(item);
  else lists.set(key, [item]);
}

export function placeOf({ row, column }: BoardStack): string {
  return `${row}/${column}`;
}

function faultsOf(board: Board): Fault[] {
  const known = lookUp(board);
  return [
    ...[...known.framesOf.keys()]
      .filter((id) => !known.stacks.has(id))
      .map((subjectId) => ({ subjectId, message: "The stack that frames would go back to is gone." })),
    ...board.stacks.flatMap((stack) => faultsOfStack(known, stack)),
    ...[...known.takesAt.values()].flatMap(faultsOfTile),
    ...board.questions.flatMap((question) => faultsOfQuestion(known, question)),
  ];
}

function faultsOfStack({ board, framesOf }: BoardLookUp, stack: BoardStack): Fault[] {
  const { id, row, column } = stack;
  const own = framesOf.get(id) ?? [];
  const { rows, columns } = board.grid;
  const isOutside = (row ?? 0) > rows || (column ?? 0) > columns || (row === null) !== (column === null);
  return [
    ...(own.length === 0 ? [{ subjectId: id, message: "It would have no frames left." }] : []),
    ...(own.length > 0 && !isReferenceRight(stack, own)
      ? [{ subjectId: id, message: "Its reference would not be one of its frames in use." }]
      : []),
    ...(isOutside ? [{ subjectId: id, message: "It would lie outside the grid." }] : []),
  ];
}

/** One of its frames in use, or none where none is in use. */
export function isReferenceRight({ referenceId }: BoardStack, own: readonly BoardFrame[]): boolean {
  const inUse = own.filter(({ setAside }) => setAside === null);
  return referenceId === null ? inUse.length === 0 : inUse.some(({ id }) => id === referenceId);
}

export function hasOneChosen(takes: readonly BoardStack[]): boolean {
  return takes.filter(({ isChosenTake }) => isChosenTake).length === 1;
}

function faultsOfTile(takes: readonly BoardStack[]): Fault[] {
  if (hasOneChosen(takes)) return [];
  return takes.map(({ id }) => ({ subjectId: id, message: "Its tile would not have exactly one chosen take." }));
}

function faultsOfQuestion({ stacks, frames }: BoardLookUp, question: BoardQuestion): Fault[] {
  const { stackIds, frameIds } = question;
  const goneStacks = stackIds.filter((id) => !stacks.has(id));
  const goneFrames = frameIds.filter((id) => !frames.has(id));
  const settled = stackIds.filter((id) => stacks.get(id)?.isSettled);
  return [
    ...[...goneStacks, ...goneFrames].map((subjectId) => ({
      subjectId,
      message: "A question would be asked about it, but it is gone.",
    })),
    ...settled.map((subjectId) => ({ subjectId, message: "It is settled, and a question about it would be open." })),
  ];
}
