import type { GridGraph } from "./collect-edges";
import { framesInUse, type StackDraft } from "./draft";
import type { Edge } from "./edges";
import { inSteps } from "./lattice-steps";
import type { Vector } from "./vector";
import type { Place } from "./number-places";
import { median } from "./robust";
import { solvePositions, type PositionEdge } from "./solve-positions";

/** Edges further off whole steps than this do not shape the positions. Our own. */
const LARGEST_MISFIT = 0.6;

/**
 * An edge that lies right by whole steps may still be a false match in plain sky. Edges further off the positions that
 * all edges together give, in long sides, are left out, the worst first. The last limit: analysis.md, step 5.
 */
const LARGEST_RESIDUALS = [0.2, 0.1, 0.05];

/** Edges that agree with the places, as wanted differences of positions in long sides. */
export function agreeingEdges(graph: GridGraph, places: readonly Place[]): PositionEdge[] {
  return graph.edges.flatMap((edge): PositionEdge[] => {
    if (edge.steps || edge.isFaint || !agreesWithPlaces(edge, graph, places)) return [];
    return [{ a: edge.a, b: edge.b, x: edge.x, y: edge.y, weight: edge.significance ** 2 }];
  });
}

export function agreesWithPlaces(edge: Edge, graph: GridGraph, places: readonly Place[]): boolean {
  const [a, b] = [places[edge.a], places[edge.b]];
  if (!a?.row || !a.column || !b?.row || !b.column) return false;
  const { columns, rows, misfit } = edge.steps ? { ...edge.steps, misfit: 0 } : inSteps(edge, graph.steps);
  return columns === b.column - a.column && rows === b.row - a.row && misfit <= LARGEST_MISFIT;
}

/**
 * Positions of the stacks on the joined picture, in full-size pixels from its top left corner.
 * @returns null for stacks that no edge connects to the largest connected part of the grid
 */
export function findPositions(
  stacks: readonly StackDraft[],
  places: readonly Place[],
  graph: GridGraph,
): ({ xPx: number; yPx: number } | null)[] {
  const { solved, connected } = solveRobustly(stacks.length, places, graph);
  if (connected.size === 0) return stacks.map(() => null);
  const members = [...connected].map((index) => solved[index] ?? { x: 0, y: 0 });
  const left = members.reduce((least, position) => Math.min(least, position.x), Infinity);
  const top = members.reduce((least, position) => Math.min(least, position.y), Infinity);
  return stacks.map(({ index, hub }) => {
    const position = solved[index];
    if (!position || !connected.has(index)) return null;
    const longSidePx = Math.max(hub.measurements.widthPx, hub.measurements.heightPx);
    return { xPx: (position.x - left) * longSidePx, yPx: (position.y - top) * longSidePx };
  });
}

/** Positions in long sides by least squares, and the stacks that trusted edges connect. */
function solveRobustly(count: number, places: readonly Place[], graph: GridGraph) {
  const { right, down } = graph.steps;
  let solved = places.map(({ row, column }): Vector => {
    const [r, c] = [row ?? 0, column ?? 0];
    return { x: c * right.x + r * down.x, y: c * right.y + r * down.y };
  });
  let edges = agreeingEdges(graph, places);
  let connected = largestConnected(count, edges);
  for (const limit of LARGEST_RESIDUALS) {
    const here = connected;
    solved = [
      ...solvePositions(
        solved,
        edges.filter((edge) => here.has(edge.a)),
      ),
    ];
    edges = edges.filter((edge) => residualOf(edge, solved) <= limit);
    connected = largestConnected(count, edges);
  }
  const here = connected;
  return {
    solved: solvePositions(
      solved,
      edges.filter((edge) => here.has(edge.a)),
    ),
    connected,
  };
}

function residualOf(edge: Pick<PositionEdge, "a" | "b" | "x" | "y">, solved: readonly Vector[]): number {
  const [a, b] = [solved[edge.a], solved[edge.b]];
  return a && b ? Math.hypot(b.x - a.x - edge.x, b.y - a.y - edge.y) : Infinity;
}

function largestConnected(count: number, edges: readonly PositionEdge[]): Set<number> {
  const neighbours: number[][] = Array.from({ length: count }, () => []);
  for (const { a, b } of edges) {
    neighbours[a]?.push(b);
    neighbours[b]?.push(a);
  }
  let largest = new Set<number>();
  const seen = new Set<number>();
  for (let start = 0; start < count; start++) {
    if (seen.has(start) || neighbours[start]?.length === 0) continue;
    const members = new Set([start]);
    for (const index of members) for (const next of neighbours[index] ?? []) members.add(next);
    for (const index of members) seen.add(index);
    if (members.size > largest.size) largest = members;
  }
  // A single stack is a picture of its own and lies at the corner.
  return largest.size === 0 && count === 1 ? new Set([0]) : largest;
}

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
  graph: GridGraph,
): Seam[] {
  const positions = findPositions(stacks, places, graph);
  const direct = new Map<string, Edge>();
  for (const edge of graph.edges) {
    if (!edge.steps && !edge.isFaint && agreesWithPlaces(edge, graph, places)) direct.set(`${edge.a} ${edge.b}`, edge);
  }
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
      const solved = positionStep(positions, stack, other);
      const measured = directStep(direct, stack.index, other.index);
      const step = solved && measured && !isNear(solved, measured) ? solved : (measured ?? solved);
      const overlap = step && overlapOf(betweenMiddles(step, stack, other), side, stack);
      return [{ a: stack.index, b: other.index, side, overlap }];
    });
  });
}

function isNear(a: Vector, b: Vector): boolean {
  return Math.hypot(a.x - b.x, a.y - b.y) <= (LARGEST_RESIDUALS.at(-1) ?? 0);
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
