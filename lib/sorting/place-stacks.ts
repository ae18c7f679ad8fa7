import type { GridGraph } from "./collect-edges";
import { isFew, usualSizeOf, type StackDraft } from "./draft";
import type { Edge } from "./edges";
import { isTextured } from "./judge-pair";
import type { Component, Label } from "./lattice";
import { inSteps } from "./lattice-steps";
import { placeByWalk, type WalkPlacement, type WalkStop } from "./place-by-walk";
import type { SortOptions } from "./types";

/** Where a stack lies and how we know. Labels have no origin yet. */
export interface Spot {
  readonly label: Label | null;
  readonly basis: "fixed" | "pictures" | "order" | "none";
  /** A possible stray that was kept out of the grid. */
  readonly isStray: boolean;
  /** No doubt at all that it is none of the tiles. */
  readonly isCertainStray: boolean;
  /** The order shot left more than one way to place it. */
  readonly isUnsure: boolean;
}

export interface Layout {
  /** By stack index. */
  readonly spots: readonly Spot[];
  /** Usual number of frames of a stack. */
  readonly usualSize: number;
  readonly walk: WalkPlacement | null;
}

/** A stack this far off the lattice, in steps, shows something between two tiles. Our own. */
const STRAY_MISFIT = 0.3;
/** Edges with whole stacks that weigh less than this together may be chance. Our own. */
const LEAST_FEW_WEIGHT = 6;
/** Cost of leaving an unmatched textured stack of usual size out, relative to one hole. Our own. */
const FULL_STACK_COST = 1.2;
const SINGLE_FRAME_COST = 0.4;
const PLAIN_FEW_COST = 0.6;
/** Share of a separate piece that must agree on an offset for all of it to be moved there. Our own. */
const LEAST_PIECE_AGREEMENT = 0.5;
/** Below this margin another walk does nearly as well. Our own. */
const SURE_MARGIN = 0.5;

/**
 * Places the stacks: those that the pictures connect by their labels, the others along the walk.
 * @param bodies - indices of the stacks of each camera in the order shot
 */
export function placeStacks(
  stacks: readonly StackDraft[],
  graph: GridGraph,
  bodies: readonly (readonly number[])[],
  options: SortOptions,
): Layout {
  const usualSize = usualSizeOf(stacks);
  const main = graph.components[0] ?? new Map<number, Label>();
  const strays = findStrays(stacks, graph, usualSize);
  const labels = new Map([...main].filter(([index]) => !strays.has(index) && (main.size > 1 || stacks.length === 1)));
  const sequences = bodies.map((list) =>
    list.flatMap((index): WalkStop[] => {
      const stack = stacks[index];
      if (!stack || strays.has(index)) return [];
      return [{ index, label: labels.get(index) ?? null, leaveOutCost: leaveOutCost(stack, graph, usualSize) }];
    }),
  );
  const isComplete = sequences.flat().every((stop) => stop.label);
  const wishes = { rows: options.expectedRows, columns: options.expectedColumns };
  const walk = isComplete ? null : placeByWalk(sequences, wishes);
  const byOrder = snapPieces(walk?.labels ?? new Map<number, Label>(), graph.components.slice(1), labels);
  const spots = stacks.map(({ index, fixed }): Spot => {
    const none = { label: null, isStray: false, isCertainStray: false, isUnsure: false };
    if (fixed && fixed.row !== null) return { ...none, label: labels.get(index) ?? null, basis: "fixed" };
    if (strays.has(index)) return { ...none, basis: "none", isStray: true, isCertainStray: strays.get(index) === true };
    const label = labels.get(index);
    if (label) return { ...none, label, basis: "pictures" };
    const guess = byOrder.get(index);
    const isUnsure = (walk?.unsure.has(index) ?? true) || (walk?.margin ?? 0) < SURE_MARGIN;
    if (guess) return { ...none, label: guess, basis: "order", isUnsure };
    const isStray = stacks[index] ? leaveOutCost(stacks[index], graph, usualSize) !== null : false;
    return { ...none, basis: "none", isStray, isUnsure: true };
  });
  return { spots, usualSize, walk };
}

/** Few frames that match nothing although they could, or that lie between the tiles. */
function findStrays(stacks: readonly StackDraft[], graph: GridGraph, usualSize: number): Map<number, boolean> {
  const strays = new Map<number, boolean>();
  const edges = edgesByStack(stacks.length, graph.edges);
  const few = new Set(stacks.filter((stack) => isFew(stack, usualSize)).map((stack) => stack.index));
  for (const stack of stacks) {
    if (stack.fixed || !few.has(stack.index)) continue;
    const own = (edges[stack.index] ?? []).filter((edge) => !few.has(edge.a) || !few.has(edge.b));
    const weight = own.reduce((sum, edge) => sum + edge.weight, 0);
    if (weight < LEAST_FEW_WEIGHT ? isTextured(stack.hub) : misfitOf(own, graph) > STRAY_MISFIT) {
      strays.set(stack.index, false);
    }
  }
  // Several frames of the ground before the feet match each other, and nothing of the scene.
  for (const piece of graph.components.slice(1)) {
    const members = [...piece.keys()].flatMap((index) => stacks[index] ?? []);
    const isOther = members.every((stack) => !stack.fixed && isFew(stack, usualSize) && isTextured(stack.hub));
    if (isOther) for (const stack of members) strays.set(stack.index, false);
  }
  return strays;
}

export function edgesByStack(count: number, edges: readonly Edge[]): Edge[][] {
  const lists: Edge[][] = Array.from({ length: count }, () => []);
  for (const edge of edges) {
    lists[edge.a]?.push(edge);
    lists[edge.b]?.push(edge);
  }
  return lists;
}

function misfitOf(edges: readonly Edge[], graph: GridGraph): number {
  const weight = edges.reduce((sum, edge) => sum + edge.weight, 0);
  return (
    edges.reduce((sum, edge) => sum + edge.weight * (edge.steps ? 0 : inSteps(edge, graph.steps).misfit), 0) / weight
  );
}

function leaveOutCost(stack: StackDraft, graph: GridGraph, usualSize: number): number | null {
  if (stack.fixed) return null;
  const piece = graph.components.find((component) => component.has(stack.index));
  if ((piece?.size ?? 1) > 1) return null;
  const few = isFew(stack, usualSize);
  if (!isTextured(stack.hub)) return few ? PLAIN_FEW_COST : null;
  if (usualSize < 3) return SINGLE_FRAME_COST;
  return few ? 0.1 : FULL_STACK_COST;
}

/** Pieces of two and more stacks that only the order shot connects to the rest keep their shape. */
function snapPieces(
  guesses: ReadonlyMap<number, Label>,
  pieces: readonly Component[],
  labels: ReadonlyMap<number, Label>,
): Map<number, Label> {
  const result = new Map(guesses);
  const taken = new Set([...labels.values()].map((label) => `${label.column} ${label.row}`));
  for (const piece of pieces) {
    if (piece.size < 2) continue;
    const votes = new Map<string, { column: number; row: number; count: number }>();
    for (const [index, own] of piece) {
      const guess = guesses.get(index);
      if (!guess) continue;
      const [column, row] = [guess.column - own.column, guess.row - own.row];
      const key = `${column} ${row}`;
      votes.set(key, { column, row, count: (votes.get(key)?.count ?? 0) + 1 });
    }
    const best = [...votes.values()].sort((a, b) => b.count - a.count)[0];
    if (!best || best.count < piece.size * LEAST_PIECE_AGREEMENT) continue;
    const moved = [...piece].map(([index, own]) => {
      return [index, { column: own.column + best.column, row: own.row + best.row }] as const;
    });
    if (moved.some(([, label]) => taken.has(`${label.column} ${label.row}`))) continue;
    for (const [index, label] of moved) result.set(index, label);
  }
  return result;
}
