import { applyChanges, type Change, type FramePatch, seamKey, type StackPatch } from "@/lib/board/changes";
import { currentSeams, lyingSeamKey } from "@/lib/board/current-seams";
import { causeStands, elsewhereStack, isMeasuredQuestion } from "@/lib/board/measured-questions";
import type { Board, BoardFrame, BoardSeam } from "@/lib/board/model";
import { newId } from "@/lib/ids";
import type { ProposedQuestion } from "@/lib/sorting/types";

interface Point {
  readonly xPx: number;
  readonly yPx: number;
}

/** What was measured within one stack, and the state of it that this is true of. */
export interface MeasuredStack {
  readonly id: string;
  /** From `stackStates`, of the board that was measured. */
  readonly state: string;
  readonly frames: readonly {
    readonly id: string;
    readonly relativeSharpness: number | null;
    readonly shift: Point | null;
  }[];
  readonly spot: { readonly x: number; readonly y: number };
  /** On the joined picture; left out: nothing new is known of it. */
  readonly position?: Point;
}

export interface Measured {
  readonly stacks: readonly MeasuredStack[];
  readonly seams: readonly (BoardSeam & { readonly states: string })[];
  /** All that is to be asked of these stacks and of any seam. */
  readonly questions: readonly (ProposedQuestion & { readonly states: string })[];
}

/** Less than this is the same, px and fractions: it is far below what the measurements resolve. */
const SAME_PX = 0.5;
const SAME_SHARE = 0.002;

/**
 * What measurements of a stack depend on: its frames, which of them are in use, and its reference.
 * @returns of every stack of the board, by id; one that is not there has none
 */
export function stackStates(board: Pick<Board, "stacks" | "frames">): ReadonlyMap<string, string> {
  const framesOf = new Map<string, string[]>(board.stacks.map(({ id }) => [id, []]));
  for (const { id, stackId, setAside } of board.frames) {
    if (stackId !== null) framesOf.get(stackId)?.push(`${id}${setAside === null ? "" : " aside"}`);
  }
  return new Map(
    board.stacks.map(({ id, referenceId }) => {
      const inStack = (framesOf.get(id) ?? []).sort();
      return [id, `${referenceId ?? "none"}: ${inStack.join(", ")}`];
    }),
  );
}

/** What the measurement of a seam depends on: the states of both its stacks. */
export function seamStates(
  { stackId, neighbourId }: Pick<BoardSeam, "stackId" | "neighbourId">,
  states: ReadonlyMap<string, string>,
): string {
  return [stackId, neighbourId].map((id) => states.get(id) ?? "gone").join(" | ");
}

/** The states of all stacks that a question is about. */
export function statesOf(
  { stackIds }: Pick<ProposedQuestion, "stackIds">,
  states: ReadonlyMap<string, string>,
): string {
  return stackIds.map((id) => states.get(id) ?? "gone").join(" | ");
}

/**
 * What measurements change on a board that may have moved on meanwhile: only what still holds, and nothing that people
 * decide. Empty where everything is known already.
 * @param settledKeys - of questions that were answered by now
 */
export function measuredChanges(board: Board, measured: Measured, settledKeys: readonly string[] = []): Change[] {
  const changes = measurementChanges(board, measured);
  return [...changes, ...questionChanges(applyChanges(board, changes), measured, settledKeys)];
}

/** Asks what is not asked yet, and withdraws what has no cause any more. */
function questionChanges(board: Board, { stacks, questions }: Measured, settledKeys: readonly string[]): Change[] {
  const states = stackStates(board);
  const looked = new Set<string | null>([null]);
  for (const { id, state } of stacks) if (states.get(id) === state) looked.add(id);
  const wanted = new Set(questions.map(({ key }) => key));
  const open = board.questions.filter(isMeasuredQuestion);
  const known = new Set([...settledKeys, ...open.map(({ key }) => key)]);
  const gone = open.filter((question) => {
    return !causeStands(board, question) || (looked.has(elsewhereStack(question)) && !wanted.has(question.key));
  });
  const fresh = questions.filter((question) => {
    return !known.has(question.key) && statesOf(question, states) === question.states && causeStands(board, question);
  });
  return [
    ...gone.map((question): Change => ({ on: "question", question, isOpen: false, isWithdrawn: true })),
    ...fresh.map(({ states: _, ...question }): Change => {
      return { on: "question", question: { ...question, id: newId() }, isOpen: true, isWithdrawn: true };
    }),
  ];
}

function measurementChanges(board: Board, { stacks, seams }: Measured): Change[] {
  const states = stackStates(board);
  const standing = stacks.filter(({ id, state }) => states.get(id) === state);
  const neighbours = new Set(currentSeams(board).map(lyingSeamKey));
  const known = new Map(board.seams.map((seam) => [lyingSeamKey(seam), seam]));
  // A pair has one record: what was measured while the two lay otherwise goes.
  const pairs = new Map(board.seams.map((seam) => [seamKey(seam), seam]));
  const fresh = seams.filter((seam) => {
    const isStanding = neighbours.has(lyingSeamKey(seam)) && seamStates(seam, states) === seam.states;
    return isStanding && !isSameOverlap(known.get(lyingSeamKey(seam)), seam);
  });
  const frames = new Map(board.frames.map((frame) => [frame.id, frame]));
  const after = fresh.map(({ states: _, ...seam }) => seam);
  const before = after.flatMap((seam) => pairs.get(seamKey(seam)) ?? []);
  return [
    ...standing.flatMap((stack) => [...frameChanges(frames, stack), ...stackChange(board, stack)]),
    ...(after.length > 0 ? [{ on: "seams" as const, before, after }] : []),
  ];
}

function frameChanges(present: ReadonlyMap<string, BoardFrame>, { frames }: MeasuredStack): Change[] {
  return frames.flatMap(({ id, relativeSharpness, shift }): Change[] => {
    const frame = present.get(id);
    if (!frame) return [];
    const after: FramePatch = {
      ...(!isNear(frame.relativeSharpness, relativeSharpness, SAME_SHARE) && { relativeSharpness }),
      ...(!isSamePoint(frame.shift, shift) && { shift }),
    };
    const before: FramePatch = {
      ...("relativeSharpness" in after && { relativeSharpness: frame.relativeSharpness }),
      ...("shift" in after && { shift: frame.shift }),
    };
    return Object.keys(after).length === 0 ? [] : [{ on: "frame", id, before, after }];
  });
}

function stackChange(board: Board, { id, spot, position }: MeasuredStack): Change[] {
  const stack = board.stacks.find((each) => each.id === id);
  if (!stack) return [];
  const isElsewhere = spot.x !== stack.spot.x || spot.y !== stack.spot.y;
  const isMoved = position !== undefined && !isSamePoint(position, stack.position);
  const after: StackPatch = { ...(isElsewhere && { spot }), ...(isMoved && { position }) };
  const before: StackPatch = { ...(isElsewhere && { spot: stack.spot }), ...(isMoved && { position: stack.position }) };
  return isElsewhere || isMoved ? [{ on: "stack", id, before, after }] : [];
}

function isSameOverlap(known: BoardSeam | undefined, seam: BoardSeam): boolean {
  return known !== undefined && isNear(known.overlap, seam.overlap, SAME_SHARE);
}

function isSamePoint(a: Point | null, b: Point | null): boolean {
  return a === null || b === null ? a === b : isNear(a.xPx, b.xPx, SAME_PX) && isNear(a.yPx, b.yPx, SAME_PX);
}

function isNear(a: number | null, b: number | null, most: number): boolean {
  return a === null || b === null ? a === b : Math.abs(a - b) <= most;
}
