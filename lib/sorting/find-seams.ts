import { framesInUse, type StackDraft } from "./draft";
import type { Edge } from "./edges";
import type { Positions } from "./find-positions";
import type { Place } from "./number-places";
import { median } from "./robust";
import type { Vector } from "./vector";

export interface Seam {
  readonly a: number;
  readonly b: number;
  readonly side: "right" | "below";
  /** Fraction of the tile's side, 0 to 1; null: could not be measured. */
  readonly overlap: number | null;
}

/** Seams between the chosen takes of neighbouring tiles, each measured directly or, failing that, through the others. */
export function findSeams(
  stacks: readonly StackDraft[],
  places: readonly Place[],
  chosen: readonly boolean[],
  { positions, trusted }: Positions,
): Seam[] {
  const direct = new Map(trusted.map((edge) => [`${edge.a} ${edge.b}`, edge]));
  const at = new Map<string, StackDraft>();
  for (const stack of stacks) {
    const place = places[stack.index];
    if (place?.row && chosen[stack.index]) at.set(`${place.row} ${place.column}`, stack);
  }
  return [...at.values()].flatMap((stack) => {
    const { row, column } = places[stack.index] ?? {};
    const sides = [
      { side: "right" as const, other: at.get(`${row} ${(column ?? 0) + 1}`) },
      { side: "below" as const, other: at.get(`${(row ?? 0) + 1} ${column}`) },
    ];
    return sides.flatMap(({ side, other }): Seam[] => {
      if (!other) return [];
      const step = directStep(direct, stack.index, other.index) ?? positionStep(positions, stack, other);
      const overlap = step && overlapAt(step, side, stack, other);
      return [{ a: stack.index, b: other.index, side, overlap }];
    });
  });
}

function directStep(direct: ReadonlyMap<string, Edge>, a: number, b: number): Vector | null {
  const edge = direct.get(`${Math.min(a, b)} ${Math.max(a, b)}`);
  if (!edge) return null;
  return a < b ? { x: edge.x, y: edge.y } : { x: -edge.x, y: -edge.y };
}

function positionStep(
  positions: readonly ({ xPx: number; yPx: number } | null)[],
  a: StackDraft,
  b: StackDraft,
): Vector | null {
  const [from, to] = [positions[a.index], positions[b.index]];
  if (!from || !to) return null;
  const longSidePx = Math.max(a.hub.measurements.widthPx, a.hub.measurements.heightPx);
  return { x: (to.xPx - from.xPx) / longSidePx, y: (to.yPx - from.yPx) / longSidePx };
}

/**
 * Overlap of two neighbouring stacks.
 * @param step - corner of b's reference in a's, in long sides of a frame
 * @returns fraction of the tile's side, 0 to 1
 */
export function overlapAt(step: Vector, side: "right" | "below", a: StackDraft, b: StackDraft): number {
  return overlapOf(betweenMiddles(step, a, b), side, a);
}

/**
 * From the step between two references to that between the middles of their stacks: what is merged is the whole stack,
 * and a handheld reference may lie off its middle.
 */
function betweenMiddles(step: Vector, a: StackDraft, b: StackDraft): Vector {
  const [from, to] = [middleOf(a), middleOf(b)];
  return { x: step.x + to.x - from.x, y: step.y + to.y - from.y };
}

/** Median framing of the frames in use against the reference, in long sides. */
function middleOf(stack: StackDraft): Vector {
  const { widthPx, heightPx } = stack.hub.measurements;
  const shifts = framesInUse(stack).flatMap(({ shift }) => shift ?? []);
  if (shifts.length === 0) return { x: 0, y: 0 };
  const longSidePx = Math.max(widthPx, heightPx);
  return {
    x: median(shifts.map(({ xPx }) => xPx)) / longSidePx,
    y: median(shifts.map(({ yPx }) => yPx)) / longSidePx,
  };
}

function overlapOf(step: Vector, side: "right" | "below", { hub }: StackDraft): number {
  const { widthPx, heightPx } = hub.measurements;
  const longSidePx = Math.max(widthPx, heightPx);
  const share = side === "right" ? Math.abs(step.x * longSidePx) / widthPx : Math.abs(step.y * longSidePx) / heightPx;
  return Math.min(1, Math.max(0, 1 - share));
}
