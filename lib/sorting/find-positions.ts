import type { GridGraph } from "./collect-edges";
import type { StackDraft } from "./draft";
import type { Edge } from "./edges";
import { inSteps } from "./lattice-steps";
import type { Place } from "./number-places";
import { median } from "./robust";
import { solvePositions } from "./solve-positions";
import type { Vector } from "./vector";

/** Edges further off whole steps than this do not shape the positions. Our own. */
const LARGEST_MISFIT = 0.6;
/** An edge that lies further off the positions than so many times the usual, and at least so far, is wrong. Our own. */
const OUTLIER_FACTOR = 6;
const LEAST_OUTLIER = 0.015;
/** The worst go first: they pull the positions off so that right edges seem wrong too. Our own. */
const WORST_SHARE = 0.5;
const ROUNDS = 12;

/** Where the stacks lie on the joined picture. */
export interface Positions {
  /** By stack index, full-size px from the top left corner; null where no edge connects it to most of the grid. */
  readonly positions: readonly ({ readonly xPx: number; readonly yPx: number } | null)[];
  /** Edges that agree with the places and with each other. */
  readonly trusted: readonly Edge[];
}

export function agreesWithPlaces(edge: Edge, graph: GridGraph, places: readonly Place[]): boolean {
  const [a, b] = [places[edge.a], places[edge.b]];
  if (!a?.row || !a.column || !b?.row || !b.column) return false;
  const { columns, rows, misfit } = edge.steps ? { ...edge.steps, misfit: 0 } : inSteps(edge, graph.steps);
  return columns === b.column - a.column && rows === b.row - a.row && misfit <= LARGEST_MISFIT;
}

/**
 * Positions that fit the edges best, by least squares over the edges that agree with the places; edges that stand out
 * against the result are left out and the rest solved again.
 */
export function findPositions(stacks: readonly StackDraft[], places: readonly Place[], graph: GridGraph): Positions {
  const { right, down } = graph.steps;
  let solved = places.map(({ row, column }): Vector => {
    const [r, c] = [row ?? 0, column ?? 0];
    return { x: c * right.x + r * down.x, y: c * right.y + r * down.y };
  });
  let trusted = graph.edges.filter((edge) => !edge.steps && !edge.isFaint && agreesWithPlaces(edge, graph, places));
  for (let round = 0; round < ROUNDS; round++) {
    solved = solvePositions(
      solved,
      trusted.map((edge) => ({ ...edge, weight: edge.significance ** 2 })),
    );
    const kept = withoutOutliers(trusted, solved);
    if (kept.length === trusted.length) break;
    trusted = kept;
  }
  const connected = largestConnected(stacks.length, trusted);
  const members = [...connected].map((index) => solved[index] ?? { x: 0, y: 0 });
  const left = members.reduce((least, position) => Math.min(least, position.x), Infinity);
  const top = members.reduce((least, position) => Math.min(least, position.y), Infinity);
  const positions = stacks.map(({ index, hub }) => {
    const position = solved[index];
    if (!position || !connected.has(index)) return null;
    const longSidePx = Math.max(hub.measurements.widthPx, hub.measurements.heightPx);
    return { xPx: (position.x - left) * longSidePx, yPx: (position.y - top) * longSidePx };
  });
  return { positions, trusted };
}

function withoutOutliers(edges: readonly Edge[], positions: readonly Vector[]): Edge[] {
  const residuals = edges.map(({ a, b, x, y }) => {
    const [from, to] = [positions[a], positions[b]];
    return from && to ? Math.hypot(to.x - from.x - x, to.y - from.y - y) : Infinity;
  });
  const worst = residuals.reduce((most, residual) => Math.max(most, residual), 0);
  const limit = Math.max(LEAST_OUTLIER, OUTLIER_FACTOR * median(residuals), WORST_SHARE * worst);
  return edges.filter((_, at) => (residuals[at] ?? Infinity) <= limit);
}

function largestConnected(count: number, edges: readonly Edge[]): Set<number> {
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
