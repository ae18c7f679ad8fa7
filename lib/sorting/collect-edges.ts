import { isFew, stackSizesOf, type StackDraft } from "./draft";
import { makeEdge, type Edge } from "./edges";
import { isTextured } from "./judge-pair";
import { labelStacks, type Component, type Label } from "./lattice";
import { inSteps, proposeSteps, type Steps } from "./lattice-steps";
import type { PairStore } from "./pair-store";
import { rateGraph } from "./rate-graph";

/** Up to this many stacks all pairs are registered; beyond, neighbours in time and neighbours foretold. */
const MOST_STACKS_FOR_ALL_PAIRS = 60;
/** Rounds of foretelling neighbours from the places found so far. */
const ROUNDS = 4;
/** Places from which separate pieces of the grid are tried against each other: ends, quarters, middle. */
const PROBES = [0, 0.25, 0.5, 0.75, 1];
const FIXED_WEIGHT = 1000;

export interface GridGraph {
  readonly edges: readonly Edge[];
  readonly steps: Steps;
  readonly components: readonly Component[];
}

type IndexPair = readonly [number, number];

/**
 * Registers the stacks' references against each other and reads labels off the edges.
 * Pairs asked for: all of n (n - 1) / 2 up to 60 stacks; beyond that about 4 n.
 * @param stacks - in the order taken; each one's index is its place in the list
 */
export async function collectEdges(
  stacks: readonly StackDraft[],
  store: PairStore,
  onDone?: (done: number, total: number) => void,
): Promise<GridGraph> {
  const pairs = new Map<string, IndexPair>();
  const measure = async (wanted: readonly IndexPair[]): Promise<void> => {
    for (const [a, b] of wanted)
      if (a !== b) pairs.set(`${Math.min(a, b)} ${Math.max(a, b)}`, [Math.min(a, b), Math.max(a, b)]);
    await store.measureAll(
      [...pairs.values()].map(([a, b]) => [stacks[a]?.hub.id ?? "", stacks[b]?.hub.id ?? ""] as const),
      onDone,
    );
  };
  if (stacks.length <= MOST_STACKS_FOR_ALL_PAIRS) {
    await measure(stacks.flatMap((_, a) => stacks.slice(a + 1).map((__, at): IndexPair => [a, a + 1 + at])));
    return readGraph(stacks, [...pairs.values()], store);
  }
  await measure(stacks.slice(1).map((_, at): IndexPair => [at, at + 1]));
  for (let round = 0; round < ROUNDS; round++) {
    const graph = readGraph(stacks, [...pairs.values()], store);
    const wanted = [...neighbourPairs(graph.components), ...probePairs(graph.components)];
    const before = pairs.size;
    await measure(wanted);
    if (pairs.size === before) break;
  }
  return readGraph(stacks, [...pairs.values()], store);
}

function readGraph(stacks: readonly StackDraft[], pairs: readonly IndexPair[], store: PairStore): GridGraph {
  const edges = pairs.flatMap(([a, b]) => {
    const [first, second] = [stacks[a], stacks[b]];
    const measure = first && second ? store.find(first.hub.id, second.hub.id) : null;
    if (!first || !second || !measure) return [];
    const edge = makeEdge({ index: a, frame: first.hub }, { index: b, frame: second.hub }, measure);
    return edge ? [edge] : [];
  });
  const all = [...edges, ...fixedEdges(stacks)].sort((p, q) => p.a - q.a || p.b - q.b);
  // What few frames show may be none of the scene: the lattice is made by whole stacks.
  const sizes = stackSizesOf(stacks);
  const few = new Set(stacks.filter((stack) => isFew(stack, sizes)).map((stack) => stack.index));
  const plain = new Set(stacks.filter((stack) => !isTextured(stack.hub)).map((stack) => stack.index));
  const whole = all.filter((edge) => !few.has(edge.a) && !few.has(edge.b));
  const aspect = usualAspect(stacks);
  const isMeasured = (a: number, b: number) => store.find(stacks[a]?.hub.id ?? "", stacks[b]?.hub.id ?? "") !== null;
  const graphs = proposeSteps(whole, aspect).map((steps): GridGraph => {
    return { edges: all, steps, components: labelStacks({ count: stacks.length, plain }, all, steps) };
  });
  const rated = graphs.map((graph) => ({ graph, rating: rateGraph(graph, { few, plain, aspect, isMeasured }) }));
  const best = rated.reduce((a, b) => (b.rating > a.rating + 1e-9 ? b : a));
  return chooseShifts(best.graph);
}

/** Once the places are known, each edge takes that of the shifts which the pictures allow that leads to its place. */
function chooseShifts(graph: GridGraph): GridGraph {
  const labels = new Map(graph.components.flatMap((component) => [...component]));
  const edges = graph.edges.map((edge): Edge => {
    const [a, b] = [labels.get(edge.a), labels.get(edge.b)];
    if (edge.steps || edge.rivals.length === 0 || !a || !b) return edge;
    const fits = [edge, ...edge.rivals].flatMap((shift) => {
      const { columns, rows, misfit } = inSteps({ ...edge, x: shift.x, y: shift.y }, graph.steps);
      return columns === b.column - a.column && rows === b.row - a.row ? [{ shift, misfit }] : [];
    });
    const best = fits.reduce<(typeof fits)[number] | null>((p, q) => (p && p.misfit <= q.misfit ? p : q), null);
    return best ? { ...edge, x: best.shift.x, y: best.shift.y, weight: best.shift.weight } : edge;
  });
  return { ...graph, edges };
}

function usualAspect(stacks: readonly StackDraft[]): number {
  const aspects = stacks.map(({ hub }) => hub.measurements.heightPx / hub.measurements.widthPx).sort((a, b) => a - b);
  return aspects[Math.floor(aspects.length / 2)] ?? 1;
}

/** What was placed before stays as it was: edges that no measurement can outvote. */
function fixedEdges(stacks: readonly StackDraft[]): Edge[] {
  const placed = stacks.flatMap((stack) => {
    const { row, column } = stack.fixed ?? { row: null, column: null };
    return row === null || column === null ? [] : [{ index: stack.index, row, column }];
  });
  return placed.slice(1).map((stack, at) => {
    const before = placed[at] ?? stack;
    const steps = { columns: stack.column - before.column, rows: stack.row - before.row };
    const none = { x: 0, y: 0, ncc: 1, significance: 0, isFaint: false, rivals: [] };
    return { a: before.index, b: stack.index, ...none, weight: FIXED_WEIGHT, steps };
  });
}

/** Stacks that should overlap by the labels found so far: beside, below and across each other. */
function neighbourPairs(components: readonly Component[]): IndexPair[] {
  return components.flatMap((component) => {
    const at = new Map<string, number[]>();
    for (const [index, label] of component) {
      const key = keyOf(label);
      at.set(key, [...(at.get(key) ?? []), index]);
    }
    return [...component].flatMap(([index, { column, row }]) =>
      [
        { column, row },
        { column: column + 1, row },
        { column, row: row + 1 },
      ].flatMap((label) => (at.get(keyOf(label)) ?? []).map((other): IndexPair => [index, other])),
    );
  });
}

function keyOf(label: Label): string {
  return `${label.column} ${label.row}`;
}

/** A few stacks of each piece against all of the piece before it in time: lines walked the same way do not touch in time. */
function probePairs(components: readonly Component[]): IndexPair[] {
  const pieces = components.map((component) => [...component.keys()].sort((a, b) => a - b));
  pieces.sort((a, b) => (a[0] ?? 0) - (b[0] ?? 0));
  return pieces.slice(1).flatMap((piece, at) => {
    const before = (pieces[at] ?? []).slice(-Math.max(4, piece.length * 2));
    const probes = [...new Set(PROBES.map((share) => piece[Math.round(share * (piece.length - 1))] ?? 0))];
    return probes.flatMap((probe) => before.map((other): IndexPair => [probe, other]));
  });
}
