import { currentSeams } from "@/lib/board/current-seams";
import type { Change, FramePatch, StackPatch } from "@/lib/board/changes";
import type { Board, BoardSeam } from "@/lib/board/model";

interface Point {
  readonly xPx: number;
  readonly yPx: number;
}

/** What was measured within one stack, and the state of it that this is true of. */
export interface MeasuredStack {
  readonly id: string;
  /** From `stackState`, of the board that was measured. */
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
}

/** Less than this is the same, px and fractions: it is far below what the measurements resolve. */
const SAME_PX = 0.5;
const SAME_SHARE = 0.002;

/** What measurements of a stack depend on: its frames, which of them are in use, and its reference. */
export function stackState(board: Board, stackId: string): string {
  const stack = board.stacks.find(({ id }) => id === stackId);
  const frames = board.frames.filter((frame) => frame.stackId === stackId);
  const inStack = frames.map(({ id, setAside }) => `${id}${setAside === null ? "" : " aside"}`).sort();
  return stack ? `${stack.referenceId ?? "none"}: ${inStack.join(", ")}` : "gone";
}

/**
 * What measurements change on a board that may have moved on meanwhile: only what still holds, and nothing that people
 * decide. Empty where everything is known already.
 */
export function measuredChanges(board: Board, { stacks, seams }: Measured): Change[] {
  const standing = stacks.filter(({ id, state }) => stackState(board, id) === state);
  const neighbours = new Set(currentSeams(board).map(keyOf));
  const known = new Map(board.seams.map((seam) => [keyOf(seam), seam]));
  // A pair has one record: measured the other way round before, that goes.
  const pairs = new Map(board.seams.map((seam) => [pairOf(seam), seam]));
  const fresh = seams.filter((seam) => {
    const states = [seam.stackId, seam.neighbourId].map((id) => stackState(board, id)).join(" | ");
    return neighbours.has(keyOf(seam)) && states === seam.states && !isSameOverlap(known.get(keyOf(seam)), seam);
  });
  const after = fresh.map(({ states: _, ...seam }) => seam);
  const before = after.flatMap((seam) => pairs.get(pairOf(seam)) ?? []);
  return [
    ...standing.flatMap((stack) => [...frameChanges(board, stack), ...stackChange(board, stack)]),
    ...(after.length > 0 ? [{ on: "seams" as const, before, after }] : []),
  ];
}

function frameChanges(board: Board, { frames }: MeasuredStack): Change[] {
  const present = new Map(board.frames.map((frame) => [frame.id, frame]));
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

function keyOf({ stackId, neighbourId, side }: BoardSeam): string {
  return `${stackId} ${neighbourId} ${side}`;
}

function pairOf({ stackId, neighbourId }: BoardSeam): string {
  return `${stackId} ${neighbourId}`;
}
