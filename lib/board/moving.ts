import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { Place } from "@/lib/board/look-up";
import type { BoardFrame } from "@/lib/board/model";
import { placeOfName, tileName } from "@/lib/board/tile-name";

/** What a person has in their hand. */
export type Moving =
  | { readonly kind: "frames"; readonly frameIds: readonly string[] }
  | { readonly kind: "stack"; readonly stackId: string };

/** What happens to a stack that has the place already. */
export type Occupied = "swap" | "push" | "take";

/** Where it may be put. Frames go into the chosen take of a place; `stack` names one take, or one without a place. */
export type Target =
  | { readonly kind: "place"; readonly row: number; readonly column: number; readonly occupied?: Occupied }
  | { readonly kind: "stack"; readonly stackId: string }
  | { readonly kind: "new-stack" }
  | { readonly kind: "loose" }
  | { readonly kind: "out" };

/** The name of the loose frames' cell, as of a tile. */
const LOOSE_NAME = "loose";

/** The target that a part of the board with this name is: a tile, a hole, a new place, a stack without a place, loose. */
export function targetOfName(index: BoardIndex, name: string): Target | null {
  if (name === LOOSE_NAME) return { kind: "loose" };
  const unplaced = index.unplaced.find((tile) => tile.name === name);
  if (unplaced) return { kind: "stack", stackId: unplaced.stack.id };
  const place = placeOfName(name);
  return place && { kind: "place", ...place };
}

/** "A4", "take 2 of A4", "Stack 1", "loose"; what is made new has no name yet. */
export function nameOfTarget(index: BoardIndex, target: Target): string {
  switch (target.kind) {
    case "place":
      return tileName(target.row, target.column);
    case "stack":
      return nameOfStack(index, target.stackId);
    case "new-stack":
      return "a new stack";
    case "loose":
      return LOOSE_NAME;
    case "out":
      return "no place";
  }
}

/** A tile's name; of a take that is not in the merge "take 2 of A4". */
export function nameOfStack(index: BoardIndex, stackId: string): string {
  const tile = index.tileOfStack.get(stackId);
  if (!tile) return "a stack";
  const take = tile.takes.find(({ id }) => id === stackId);
  return take && take.id !== tile.stack.id ? `take ${take.take} of ${tile.name}` : tile.name;
}

/** The stack that has the place now, its chosen take; null: the place is free. */
export function tileAt(index: BoardIndex, { row, column }: Place): BoardTile | null {
  return index.tiles.get(tileName(row, column)) ?? null;
}

/** The frames of what is moved, in the order taken. */
export function framesMoved(index: BoardIndex, moving: Moving): readonly BoardFrame[] {
  if (moving.kind === "stack") return index.framesOfStack.get(moving.stackId) ?? [];
  const wanted = new Set(moving.frameIds);
  return index.board.frames.filter(({ id }) => wanted.has(id));
}

/** The stack that frames would go into: its id, null for loose; undefined where a new one would be made. */
export function stackOfTarget(index: BoardIndex, target: Target): string | null | undefined {
  if (target.kind === "loose") return null;
  if (target.kind === "stack") return target.stackId;
  return target.kind === "place" ? tileAt(index, target)?.stack.id : undefined;
}

/** The same target, said as text: what changes when the pointer goes on. */
export function targetKey(target: Target | null): string {
  return target === null ? "" : Object.values(target).join(" ");
}

/**
 * The command that puts what is moved there.
 * @param newStackId - for the stack that may have to be made
 * @returns null where nothing would change, or where a place that is taken needs its choice first
 */
export function commandFor(index: BoardIndex, moving: Moving, target: Target, newStackId: string): CommandDraft | null {
  if (moving.kind === "stack" && target.kind !== "loose") return placeCommand(index, moving.stackId, target);
  const to = stackOfTarget(index, target);
  const frames = framesMoved(index, moving).filter(({ stackId }) => to === undefined || stackId !== to);
  if (frames.length === 0 || target.kind === "out") return null;
  const place = target.kind === "place" ? { row: target.row, column: target.column } : null;
  return {
    type: "move-frames",
    frameIds: frames.map(({ id }) => id),
    to:
      to === undefined
        ? { kind: "new-stack", stackId: newStackId, place }
        : to === null
          ? { kind: "loose" }
          : { kind: "stack", stackId: to },
  };
}

function placeCommand(index: BoardIndex, stackId: string, target: Target): CommandDraft | null {
  const stack = index.tileOfStack.get(stackId)?.takes.find(({ id }) => id === stackId);
  if (!stack) return null;
  if (target.kind === "out") {
    return stack.row === null ? null : { type: "place-stack", stackId, place: null };
  }
  if (target.kind !== "place" || (stack.row === target.row && stack.column === target.column)) return null;
  const place = { row: target.row, column: target.column };
  if (!tileAt(index, place)) return { type: "place-stack", stackId, place };
  if (target.occupied === undefined) return null;
  return { type: "place-stack", stackId, place, occupied: target.occupied };
}

/** A tile this small has no room for three answers; they are asked after the drop. */
const ZONES_LEAST_PX = { width: 100, height: 84 };
/** Share of a taken tile's height and width that its bands at the lower and the right edge have: the rest swaps. */
export const ZONE_BAND = 0.24;

/**
 * Which answer a pointer within a taken tile is on: its middle swaps, the right edge makes room, the lower edge lays it
 * there as another take.
 * @param box - the tile's, px
 * @param point - from the tile's upper left corner, px
 * @returns undefined where the tile is too small for three
 */
export function zoneAt(
  box: { readonly width: number; readonly height: number },
  point: { readonly x: number; readonly y: number },
): Occupied | undefined {
  if (box.width < ZONES_LEAST_PX.width || box.height < ZONES_LEAST_PX.height) return undefined;
  if (point.y >= box.height * (1 - ZONE_BAND)) return "take";
  return point.x >= box.width * (1 - ZONE_BAND) ? "push" : "swap";
}

/**
 * The target one step on by an arrow key: over tiles, holes, and one new line at the right and the bottom; from the
 * top row and the first column on to the loose frames' cell in the corner.
 */
export function stepTarget(index: BoardIndex, from: Target | null, key: string): Target | null {
  const [down, across] = ARROWS[key] ?? [];
  if (down === undefined || across === undefined) return null;
  if (from?.kind !== "place") {
    return down > 0 || across > 0 ? { kind: "place", row: 1, column: 1 } : null;
  }
  const row = from.row + down;
  const column = from.column + across;
  if (row < 1 || column < 1) return { kind: "loose" };
  const { rows, columns } = index.board.grid;
  return row > rows + 1 || column > columns + 1 ? null : { kind: "place", row, column };
}

const ARROWS: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [0, -1],
  ArrowRight: [0, 1],
  ArrowUp: [-1, 0],
  ArrowDown: [1, 0],
};

/** Where what is picked up lies now: where moving by arrows begins. */
export function startTarget(index: BoardIndex, moving: Moving): Target {
  const stackId = moving.kind === "stack" ? moving.stackId : (framesMoved(index, moving)[0]?.stackId ?? null);
  const tile = stackId === null ? undefined : index.tileOfStack.get(stackId);
  if (!tile) return { kind: "loose" };
  if (tile.row === null || tile.column === null) return { kind: "place", row: index.board.grid.rows + 1, column: 1 };
  return { kind: "place", row: tile.row, column: tile.column };
}
