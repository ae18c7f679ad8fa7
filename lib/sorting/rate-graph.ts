import type { GridGraph } from "./collect-edges";
import type { Edge } from "./edges";
import { clashWeight, trustIn, type Component, type Label } from "./lattice";
import { inSteps, misfitScale, type Steps } from "./lattice-steps";
import { LARGEST_SAME_PLACE } from "./vector";
import { boxOf, countBreaks } from "./walks";

export interface RatingContext {
  /** Stacks of few frames, which may be none of the scene. */
  readonly few: ReadonlySet<number>;
  /** Stacks with too little texture to be told apart. */
  readonly plain: ReadonlySet<number>;
  /** Height over width of a frame. */
  readonly aspect: number;
  readonly isMeasured: (a: number, b: number) => boolean;
}

// What speaks for or against a lattice, in the weight of edges (30 is a sure one). Our own, from generated shoots.
/** Most stacks follow each other by one step; each that does speaks for a lattice like a weak edge. */
const SINGLE_STEP_WEIGHT = 4;
/** Nearly all grids are walked in a regular way. */
const BREAK_WEIGHT = 10;
/** A place within a piece that no stack has is rarer than a step too fine. */
const HOLE_WEIGHT = 2;
/** A whole line that no stack has means that the step is too fine. */
const EMPTY_LINE_WEIGHT = 25;
/** Neighbours that should overlap by their whole area and do not match; less for less overlap. */
const MISSING_WEIGHT = 20;

/** How well a lattice explains edges, order and places: higher is better. */
export function rateGraph(graph: GridGraph, context: RatingContext): number {
  const { few, plain } = context;
  const components = graph.components.map(
    (piece): Component => new Map([...piece].filter(([index]) => !few.has(index))),
  );
  const agreeing = agreeingEdges(graph, components);
  const samePlace = new Set(agreeing.edges.filter(isSamePlace).map(({ a, b }) => `${a} ${b}`));
  let rating = agreeing.weight;
  for (const component of components) {
    rating -= HOLE_WEIGHT * countHoles(component);
    rating -= EMPTY_LINE_WEIGHT * countEmptyLines(component);
    rating -= MISSING_WEIGHT * missingOverlap(component, graph.steps, agreeing.edges, context);
    const ordered = [...component].sort(([a], [b]) => a - b);
    rating -= BREAK_WEIGHT * countBreaks(ordered.map(([, label]) => label));
    const at = new Map<string, number>();
    ordered.forEach(([index, { column, row }], order) => {
      const other = at.get(`${column} ${row}`);
      if (other !== undefined && !samePlace.has(`${other} ${index}`)) rating -= clashWeight(other, index, plain);
      at.set(`${column} ${row}`, index);
      const [before, label] = ordered[order - 1] ?? [];
      if (before !== index - 1 || !label) return;
      if (Math.abs(column - label.column) + Math.abs(row - label.row) === 1) rating += SINGLE_STEP_WEIGHT;
    });
  }
  return rating;
}

function isSamePlace({ x, y }: Edge): boolean {
  return Math.hypot(x, y) < LARGEST_SAME_PLACE;
}

function agreeingEdges(
  { edges, steps }: GridGraph,
  components: readonly Component[],
): { readonly edges: Edge[]; readonly weight: number } {
  const scale = misfitScale(edges, steps);
  const labels = new Map(components.flatMap((component) => [...component]));
  const agreeing: Edge[] = [];
  let weight = 0;
  for (const edge of edges) {
    const [a, b] = [labels.get(edge.a), labels.get(edge.b)];
    if (edge.steps || !a || !b) continue;
    const found = isSamePlace(edge) ? { columns: 0, rows: 0, misfit: 0 } : inSteps(edge, steps);
    if (b.column - a.column !== found.columns || b.row - a.row !== found.rows) continue;
    const trust = trustIn(edge, found, scale);
    if (trust > 0.3) agreeing.push(edge);
    weight += edge.weight * trust;
  }
  return { edges: agreeing, weight };
}

function countHoles(component: Component): number {
  const box = boxOf([...component.values()]);
  return box ? Math.max(0, (box.bottom - box.top + 1) * (box.right - box.left + 1) - component.size) : 0;
}

function countEmptyLines(component: Component): number {
  const box = boxOf([...component.values()]);
  if (!box) return 0;
  const rows = new Set([...component.values()].map(({ row }) => row));
  const columns = new Set([...component.values()].map(({ column }) => column));
  return box.bottom - box.top + 1 - rows.size + (box.right - box.left + 1 - columns.size);
}

/** Area, in frames, by which textured neighbours of this lattice should overlap that were measured and do not match. */
function missingOverlap(
  component: Component,
  { right, down }: Steps,
  agreeing: readonly Edge[],
  { plain, aspect, isMeasured }: RatingContext,
): number {
  const matched = new Set(agreeing.map(({ a, b }) => `${a} ${b}`));
  const at = new Map<string, number>();
  for (const [index, label] of component) if (!plain.has(index)) at.set(keyOf(label), index);
  const sides = [
    { columns: 1, rows: 0, step: right },
    { columns: 0, rows: 1, step: down },
  ];
  const [width, height] = aspect <= 1 ? [1, aspect] : [1 / aspect, 1];
  return [...at.values()].reduce((sum, index) => {
    const label = component.get(index);
    return sides.reduce((total, { columns, rows, step }) => {
      const other = label && at.get(keyOf({ column: label.column + columns, row: label.row + rows }));
      if (other === undefined || !isMeasured(index, other)) return total;
      if (matched.has(`${Math.min(index, other)} ${Math.max(index, other)}`)) return total;
      const area = Math.max(0, 1 - Math.abs(step.x) / width) * Math.max(0, 1 - Math.abs(step.y) / height);
      return total + area;
    }, sum);
  }, 0);
}

function keyOf({ column, row }: Label): string {
  return `${column} ${row}`;
}
