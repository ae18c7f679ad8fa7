import type { Edge } from "./edges";
import { inSteps, LARGEST_MISFIT_SCALE, misfitScale, type Steps, type WholeSteps } from "./lattice-steps";
import { LARGEST_SAME_PLACE } from "./vector";

/** A place relative to an origin that has no meaning: differences within one component do. */
export interface Label {
  readonly column: number;
  readonly row: number;
}

/** Stacks connected by edges, each with its label, in the order of the stacks' indices. */
export type Component = ReadonlyMap<number, Label>;

/**
 * Two stacks of one place would match beyond doubt, so that two on one place that do not weigh against it like the
 * clearest of edges; less where there is little to match. Our own.
 */
const CLASH_WEIGHT = 30;
const PLAIN_CLASH_WEIGHT = 6;

/** What it weighs against a labelling that two stacks share a place without showing the same. */
export function clashWeight(a: number, b: number, plain: ReadonlySet<number>): number {
  return plain.has(a) || plain.has(b) ? PLAIN_CLASH_WEIGHT : CLASH_WEIGHT;
}
const MOST_SWEEPS = 12;
/** A branch moves only for this share more. */
const CLEARLY_BETTER = 0.01;
/** Bounds the time on large grids. */
const MOST_CUTS = 150;

interface StepEdge {
  readonly a: number;
  readonly b: number;
  readonly columns: number;
  readonly rows: number;
  readonly weight: number;
  /** Both show the same, beyond rounding to whole steps. */
  readonly isSamePlace: boolean;
}

/**
 * Whole rows and columns from edges: a maximum spanning tree first, then whatever the outvoted edges say better.
 * Labels are carried from neighbour to neighbour and not read off global positions, so that the bend of a grid
 * turned about a point cannot add up to a wrong column.
 * @param count - number of stacks; edges name them by index
 * @param plain - stacks with too little texture to be told apart
 * @returns components, the largest first; stacks without edges are components of their own
 */
export function labelStacks(
  { count, plain }: { readonly count: number; readonly plain: ReadonlySet<number> },
  edges: readonly Edge[],
  steps: Steps,
): Component[] {
  const scale = misfitScale(edges, steps);
  const stepEdges = edges.map((edge): StepEdge => {
    if (edge.steps) {
      return { a: edge.a, b: edge.b, ...edge.steps, weight: edge.weight, isSamePlace: isZero(edge.steps) };
    }
    if (Math.hypot(edge.x, edge.y) < LARGEST_SAME_PLACE) return { ...edge, columns: 0, rows: 0, isSamePlace: true };
    const found = inSteps(edge, steps);
    const weight = edge.weight * trustIn(edge, found, scale);
    return { a: edge.a, b: edge.b, columns: found.columns, rows: found.rows, weight, isSamePlace: false };
  });
  const tree = spanningTree(count, stepEdges);
  const incident = listIncident(count, stepEdges);
  const components = collect(count, tree);
  const labels = components.map((component) => labelTree(component, listIncident(count, tree)));
  const all = new Map(labels.flatMap((component) => [...component]));
  moveBranches(all, tree, stepEdges, { count, plain });
  moveSingles(all, incident);
  const detached = findClashing(components, all, incident, plain);
  const kept = components.map((members) => members.filter((index) => !detached.has(index)));
  return [...kept, ...[...detached].map((index) => [index])]
    .filter((members) => members.length > 0)
    .map((members) => new Map(members.map((index) => [index, all.get(index) ?? { column: 0, row: 0 }])))
    .sort((a, b) => b.size - a.size || Math.min(...a.keys()) - Math.min(...b.keys()));
}

/**
 * Stacks that share a place with another without showing the same: of two textured ones the one with less support was
 * put there by chance, and where it belongs only the order shot can tell.
 */
function findClashing(
  components: readonly (readonly number[])[],
  labels: ReadonlyMap<number, Label>,
  incident: readonly (readonly StepEdge[])[],
  plain: ReadonlySet<number>,
): Set<number> {
  const clashing = new Set<number>();
  const support = (index: number) => {
    const label = labels.get(index);
    return (incident[index] ?? []).reduce((sum, edge) => {
      const other = labels.get(edge.b);
      const agrees =
        label && other && other.column - label.column === edge.columns && other.row - label.row === edge.rows;
      return agrees ? sum + edge.weight : sum;
    }, 0);
  };
  for (const members of components) {
    const at = new Map<string, number>();
    for (const index of members) {
      const label = labels.get(index);
      if (!label || plain.has(index)) continue;
      const key = `${label.column} ${label.row}`;
      const other = at.get(key);
      const isSame = (incident[index] ?? []).some((edge) => edge.b === other && edge.isSamePlace);
      if (other === undefined || isSame) {
        at.set(key, index);
        continue;
      }
      const loser = support(index) < support(other) ? index : other;
      clashing.add(loser);
      at.set(key, loser === index ? other : index);
    }
  }
  return clashing;
}

function isZero({ columns, rows }: { columns: number; rows: number }): boolean {
  return columns === 0 && rows === 0;
}

/**
 * How much an edge's word still counts for its misfit. Stacks shot one after the other are nearly always neighbours:
 * where a single step between them lies off the lattice, the tile was aimed so.
 * @param scale - of the grid, from `misfitScale`
 * @returns 0 to 1
 */
export function trustIn(edge: Pick<Edge, "a" | "b">, found: WholeSteps, scale: number): number {
  const isNextShot = Math.abs(edge.b - edge.a) === 1 && Math.abs(found.columns) + Math.abs(found.rows) === 1;
  return Math.exp(-((found.misfit / (isNextShot ? LARGEST_MISFIT_SCALE : scale)) ** 2));
}

function spanningTree(count: number, edges: readonly StepEdge[]): StepEdge[] {
  const parent = Array.from({ length: count }, (_, index) => index);
  const rootOf = (index: number): number => {
    let root = index;
    for (let up = parent[root] ?? root; up !== root; up = parent[root] ?? root) root = up;
    parent[index] = root;
    return root;
  };
  const sorted = [...edges].sort((p, q) => q.weight - p.weight || p.a - q.a || p.b - q.b);
  return sorted.filter((edge) => {
    const [a, b] = [rootOf(edge.a), rootOf(edge.b)];
    if (a === b) return false;
    parent[Math.max(a, b)] = Math.min(a, b);
    return true;
  });
}

function listIncident(count: number, edges: readonly StepEdge[]): StepEdge[][] {
  const incident: StepEdge[][] = Array.from({ length: count }, () => []);
  for (const edge of edges) {
    incident[edge.a]?.push(edge);
    incident[edge.b]?.push({ ...edge, a: edge.b, b: edge.a, columns: -edge.columns, rows: -edge.rows });
  }
  return incident;
}

function collect(count: number, tree: readonly StepEdge[]): number[][] {
  const incident = listIncident(count, tree);
  const seen = new Set<number>();
  const components: number[][] = [];
  for (let start = 0; start < count; start++) {
    if (seen.has(start)) continue;
    const members = [start];
    seen.add(start);
    for (const index of members) {
      for (const edge of incident[index] ?? []) {
        if (seen.has(edge.b)) continue;
        seen.add(edge.b);
        members.push(edge.b);
      }
    }
    components.push(members);
  }
  return components;
}

/** @param members - breadth first: each but the first has a neighbour before it */
function labelTree(members: readonly number[], incident: readonly (readonly StepEdge[])[]): Map<number, Label> {
  const labels = new Map<number, Label>([[members[0] ?? 0, { column: 0, row: 0 }]]);
  for (const index of members) {
    const from = labels.get(index);
    for (const edge of incident[index] ?? []) {
      if (!from || labels.has(edge.b)) continue;
      labels.set(edge.b, { column: from.column + edge.columns, row: from.row + edge.rows });
    }
  }
  return labels;
}

/** Where the edges across a tree edge agree on another offset than the tree's, the whole branch moves there. */
function moveBranches(
  labels: Map<number, Label>,
  tree: readonly StepEdge[],
  edges: readonly StepEdge[],
  { count, plain }: { readonly count: number; readonly plain: ReadonlySet<number> },
): void {
  const incident = listIncident(count, tree);
  const samePlace = new Set(edges.filter(({ isSamePlace }) => isSamePlace).map(({ a, b }) => pairKey(a, b)));
  // The weakest tree edges are the likeliest to be wrong; the strongest need no second look.
  for (const cut of [...tree].reverse().slice(0, MOST_CUTS)) {
    const branch = branchOf(cut, incident);
    const votes = new Map<string, { columns: number; rows: number; weight: number }>();
    for (const edge of edges) {
      const isOut = branch.has(edge.b) && !branch.has(edge.a);
      const isIn = branch.has(edge.a) && !branch.has(edge.b);
      const [from, to] = [labels.get(edge.a), labels.get(edge.b)];
      if ((!isOut && !isIn) || !from || !to) continue;
      const sign = isOut ? 1 : -1;
      const columns = sign * (from.column + edge.columns - to.column);
      const rows = sign * (from.row + edge.rows - to.row);
      const key = `${columns} ${rows}`;
      votes.set(key, { columns, rows, weight: (votes.get(key)?.weight ?? 0) + edge.weight });
    }
    const offsets = [{ columns: 0, rows: 0, weight: 0 }, ...votes.values()].map((vote) => {
      return {
        ...vote,
        score:
          vote.weight -
          weighClashes(labels, branch, vote, (a, b) => (samePlace.has(pairKey(a, b)) ? 0 : clashWeight(a, b, plain))),
      };
    });
    const stay = Math.max(
      ...offsets.filter(({ columns, rows }) => columns === 0 && rows === 0).map(({ score }) => score),
    );
    const best = offsets.reduce((p, q) => (q.score > p.score ? q : p));
    if (best.score <= stay + CLEARLY_BETTER * Math.abs(stay)) continue;
    for (const index of branch) {
      const label = labels.get(index);
      if (label) labels.set(index, { column: label.column + best.columns, row: label.row + best.rows });
    }
  }
}

/** Weight of the places that a branch, moved by an offset, would share with stacks outside it. */
function weighClashes(
  labels: ReadonlyMap<number, Label>,
  branch: ReadonlySet<number>,
  offset: { columns: number; rows: number },
  weigh: (a: number, b: number) => number,
): number {
  const outside = new Map<string, number>();
  for (const [index, label] of labels) if (!branch.has(index)) outside.set(`${label.column} ${label.row}`, index);
  let weight = 0;
  for (const index of branch) {
    const label = labels.get(index);
    const other = label && outside.get(`${label.column + offset.columns} ${label.row + offset.rows}`);
    if (other !== undefined) weight += weigh(index, other);
  }
  return weight;
}

function pairKey(a: number, b: number): string {
  return `${Math.min(a, b)} ${Math.max(a, b)}`;
}

function branchOf(cut: StepEdge, incident: readonly (readonly StepEdge[])[]): Set<number> {
  const branch = new Set([cut.b]);
  for (const index of branch) {
    for (const edge of incident[index] ?? []) {
      if (index === cut.b && edge.b === cut.a) continue;
      branch.add(edge.b);
    }
  }
  return branch;
}

/** Each stack follows the majority of its own edges, until none moves any more. */
function moveSingles(labels: Map<number, Label>, incident: readonly (readonly StepEdge[])[]): void {
  for (let sweep = 0; sweep < MOST_SWEEPS; sweep++) {
    let moved = false;
    incident.forEach((edges, index) => {
      const now = labels.get(index);
      const votes = new Map<string, { label: Label; weight: number }>();
      for (const edge of edges) {
        const other = labels.get(edge.b);
        if (!other) continue;
        const label = { column: other.column - edge.columns, row: other.row - edge.rows };
        const key = `${label.column} ${label.row}`;
        votes.set(key, { label, weight: (votes.get(key)?.weight ?? 0) + edge.weight });
      }
      const best = [...votes.values()].sort((p, q) => q.weight - p.weight)[0];
      const stay = now ? (votes.get(`${now.column} ${now.row}`)?.weight ?? 0) : 0;
      if (!best || best.weight <= stay * 1.01) return;
      labels.set(index, best.label);
      moved = true;
    });
    if (!moved) return;
  }
}
