import type { GridGraph } from "./collect-edges";
import { isFew, stackSizesOf, type StackDraft, type StackSizes } from "./draft";
import { isTextured } from "./judge-pair";
import { trustIn, type Component, type Label } from "./lattice";
import { inSteps, misfitScale } from "./lattice-steps";
import { placeByWalk, type WalkPlacement, type WalkStop } from "./place-by-walk";
import { freeByOrder } from "./free-by-order";
import { findTies, type Ties } from "./ties";
import type { SortOptions } from "./types";
import { LARGEST_SAME_PLACE } from "./vector";

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
  readonly walk: WalkPlacement | null;
  /** What holds the placed stacks to each other. */
  readonly ties: Ties;
}

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
  const sizes = stackSizesOf(stacks);
  const main = graph.components[0] ?? new Map<number, Label>();
  const strays = findStrays(stacks, graph, sizes);
  const found = new Map([...main].filter(([index]) => !strays.has(index) && (main.size > 1 || stacks.length === 1)));
  const plain = new Set(stacks.filter(({ hub }) => !isTextured(hub)).map(({ index }) => index));
  const isFixed = (index: number) => typeof stacks[index]?.fixed?.row === "number";
  const tiesOf = (placed: Component) => findTies(graph, placed, plain);
  const { pieces, ties } = tiesOf(found);
  // What hung on a stray, or was outvoted, hangs on nothing any more.
  const held = new Map([...found].filter(([index]) => pieces[0]?.has(index)));
  const layWalk = (placed: Component): WalkPlacement | null => {
    const sequences = bodies.map((list) =>
      list.flatMap((index): WalkStop[] => {
        const stack = stacks[index];
        if (!stack || strays.has(index)) return [];
        return [{ index, label: placed.get(index) ?? null, leaveOutCost: leaveOutCost(stack, graph, sizes) }];
      }),
    );
    return placeByWalk(sequences, { rows: options.expectedRows, columns: options.expectedColumns });
  };
  const freed = freeByOrder(held, ties, { bodies, layWalk, isFixed });
  const labels = new Map([...held].filter(([index]) => !freed.some((piece) => piece.has(index))));
  const torn = pieces.slice(1).map((piece): Component => new Map([...found].filter(([index]) => piece.has(index))));
  const isComplete = stacks.every(({ index }) => strays.has(index) || labels.has(index));
  const walk = isComplete ? null : layWalk(labels);
  const others = [...graph.components.slice(1), ...torn, ...freed];
  const byOrder = snapPieces(walk?.labels ?? new Map<number, Label>(), others, labels);
  const spots = stacks.map(({ index, fixed }): Spot => {
    const none = { label: null, isStray: false, isCertainStray: false, isUnsure: false };
    if (fixed && fixed.row !== null) return { ...none, label: labels.get(index) ?? null, basis: "fixed" };
    // A person took it out of the grid, or made it without a place.
    if (fixed?.byPerson) return { ...none, basis: "none" };
    if (strays.has(index)) return { ...none, basis: "none", isStray: true, isCertainStray: strays.get(index) === true };
    const label = labels.get(index);
    if (label) return { ...none, label, basis: "pictures" };
    const guess = byOrder.get(index);
    const isUnsure = (walk?.unsure.has(index) ?? true) || (walk?.margin ?? 0) < SURE_MARGIN;
    if (guess) return { ...none, label: guess, basis: "order", isUnsure };
    const isStray = stacks[index] ? leaveOutCost(stacks[index], graph, sizes) !== null : false;
    return { ...none, basis: "none", isStray, isUnsure: true };
  });
  const all = new Map(spots.flatMap(({ label }, index) => (label ? [[index, label] as const] : [])));
  return { spots, walk, ties: tiesOf(all) };
}

/** Few frames that match nothing although they could, or that lie between the tiles. */
function findStrays(stacks: readonly StackDraft[], graph: GridGraph, sizes: StackSizes): Map<number, boolean> {
  const strays = new Map<number, boolean>();
  const support = supportOf(stacks.length, graph);
  const trusted = new Set(stacks.filter((stack) => stack.fixed || !isFew(stack, sizes)).map((stack) => stack.index));
  const isTrusted = ({ index }: StackDraft) => {
    const own = support[index] ?? [];
    return own.reduce((sum, { other, weight }) => (trusted.has(other) ? sum + weight : sum), 0) >= LEAST_FEW_WEIGHT;
  };
  // What a trusted stack vouches for can vouch for others.
  for (let before = -1; before < trusted.size;) {
    before = trusted.size;
    for (const stack of stacks) if (!trusted.has(stack.index) && isTrusted(stack)) trusted.add(stack.index);
  }
  for (const stack of stacks) {
    if (!trusted.has(stack.index) && isTextured(stack.hub)) strays.set(stack.index, false);
  }
  // Several frames of the ground before the feet match each other, and nothing of the scene.
  for (const piece of graph.components.slice(1)) {
    const members = [...piece.keys()].flatMap((index) => stacks[index] ?? []);
    const isOther = members.every((stack) => !stack.fixed && isFew(stack, sizes) && isTextured(stack.hub));
    if (isOther) for (const stack of members) strays.set(stack.index, false);
  }
  return strays;
}

/** For each stack the edges that agree with where it was put, counting for less the worse they fit. */
function supportOf(count: number, { edges, steps, components }: GridGraph): { other: number; weight: number }[][] {
  const labels = new Map(components.flatMap((component) => [...component]));
  const scale = misfitScale(edges, steps);
  const lists: { other: number; weight: number }[][] = Array.from({ length: count }, () => []);
  for (const edge of edges) {
    const [a, b] = [labels.get(edge.a), labels.get(edge.b)];
    const isSame = Math.hypot(edge.x, edge.y) < LARGEST_SAME_PLACE;
    const found = edge.steps ?? (isSame ? { columns: 0, rows: 0 } : inSteps(edge, steps));
    if (!a || !b || b.column - a.column !== found.columns || b.row - a.row !== found.rows) continue;
    const weight = edge.weight * (edge.steps || isSame ? 1 : trustIn(edge, inSteps(edge, steps), scale));
    lists[edge.a]?.push({ other: edge.b, weight });
    lists[edge.b]?.push({ other: edge.a, weight });
  }
  return lists;
}

function leaveOutCost(stack: StackDraft, graph: GridGraph, sizes: StackSizes): number | null {
  if (stack.fixed) return null;
  const piece = graph.components.find((component) => component.has(stack.index));
  if ((piece?.size ?? 1) > 1) return null;
  const few = isFew(stack, sizes);
  if (!isTextured(stack.hub)) return few ? PLAIN_FEW_COST : null;
  if (sizes.few === 0) return SINGLE_FRAME_COST;
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
