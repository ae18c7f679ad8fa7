import type { Edge } from "./edges";
import { LARGEST_SAME_PLACE, type Vector } from "./vector";

/** The two steps of the grid: from a tile to its right and to its lower neighbour, in long sides of a frame. */
export interface Steps {
  readonly right: Vector;
  readonly down: Vector;
}

/** Misfit in steps at which an edge counts 1/e: tiles of a handheld or flown grid lie this far off. Our own. */
const SEARCH_MISFIT = 0.22;
const MOST_CANDIDATES = 60;
/** Steps closer than this are one candidate. */
const SAME_STEP = 0.015;
const REFINEMENTS = 10;
/**
 * Misfit in steps at which an edge's word counts 1/e: four times what is usual among the edges, within these bounds.
 * On a tripod true edges fit to a few hundredths and what a row of windows feigns does not; a flown grid is looser.
 */
const LEAST_MISFIT_SCALE = 0.1;
export const LARGEST_MISFIT_SCALE = 0.35;
const USUAL_MISFITS = 4;
/** Most grids overlap by about a third; assumed where no edge crosses lines. Source: common practice. */
const USUAL_STEP = 2 / 3;

/** Pairs of steps that are labelled and compared in full. */
const MOST_PROPOSED = 6;
/** Steps closer than this share of each other are one proposal. */
const SAME_PROPOSAL = 0.1;

/**
 * Finds what the grid's steps may be from the edges: pairs of lengths of which the edges are small whole multiples.
 * @param aspect - height over width of a frame
 * @returns one or more, the likeliest first: every edge is also a multiple of half a step, and where tiles overlap by
 *   more than half the clearest edges may span two, so that only the whole grid can tell
 */
export function proposeSteps(edges: readonly Edge[], aspect: number): Steps[] {
  const moving = edges.filter((edge) => !edge.steps && Math.hypot(edge.x, edge.y) >= LARGEST_SAME_PLACE);
  const usual = aspect <= 1 ? { x: USUAL_STEP, y: USUAL_STEP * aspect } : { x: USUAL_STEP / aspect, y: USUAL_STEP };
  const across = candidates(moving, (edge) => edge.x);
  const down = candidates(moving, (edge) => edge.y);
  const tried: { x: number; y: number; score: number }[] = [];
  for (const x of [...across, null]) {
    for (const y of [...down, null]) {
      const steps = { x: x ?? (y ?? usual.y) * (usual.x / usual.y), y: y ?? (x ?? usual.x) * (usual.y / usual.x) };
      tried.push({ ...steps, score: moving.reduce((sum, edge) => sum + fitOf(edge, steps), 0) });
    }
  }
  tried.sort((p, q) => q.score - p.score);
  const distinct: { x: number; y: number }[] = [];
  const proposed: Steps[] = [];
  for (const { x, y } of tried) {
    if (proposed.length >= MOST_PROPOSED) break;
    if (distinct.some((other) => isNear(other.x, x) && isNear(other.y, y))) continue;
    distinct.push({ x, y });
    const steps = refine(moving, { right: { x, y: 0 }, down: { x: 0, y } });
    const isKnown = proposed.some(
      ({ right, down: lower }) => isSame(right.x, steps.right.x) && isSame(lower.y, steps.down.y),
    );
    if (!isKnown) proposed.push(steps);
  }
  return proposed;
}

function isSame(a: number, b: number): boolean {
  return Math.abs(a - b) < SAME_STEP / 3;
}

function isNear(a: number, b: number): boolean {
  return Math.abs(Math.log(a / b)) < SAME_PROPOSAL;
}

function candidates(edges: readonly Edge[], lengthOf: (edge: Edge) => number): number[] {
  const sorted = [...edges].sort((a, b) => b.weight - a.weight);
  const found: number[] = [];
  for (const edge of sorted) {
    // Where tiles overlap by more than half, the clearest edges may span two steps.
    for (const length of [Math.abs(lengthOf(edge)), Math.abs(lengthOf(edge)) / 2]) {
      if (length < LARGEST_SAME_PLACE || found.some((other) => Math.abs(other - length) < SAME_STEP)) continue;
      found.push(length);
    }
    if (found.length >= MOST_CANDIDATES) break;
  }
  return found;
}

function fitOf(edge: Edge, steps: { x: number; y: number }): number {
  const columns = edge.x / steps.x;
  const rows = edge.y / steps.y;
  const misfit = Math.hypot(columns - Math.round(columns), rows - Math.round(rows));
  return edge.weight * commonness(Math.round(columns), Math.round(rows)) * Math.exp(-((misfit / SEARCH_MISFIT) ** 2));
}

/** How usual it is that two stacks so many steps apart overlap: nearly all matches are between neighbours. */
function commonness(columns: number, rows: number): number {
  const [far, near] = [Math.abs(columns), Math.abs(rows)].sort((a, b) => b - a);
  if (far === undefined || near === undefined || far === 0) return 0;
  if (far === 1) return near === 0 ? 1 : 0.9;
  if (far === 2) return near === 0 ? 0.6 : 0.45;
  return far === 3 ? 0.2 : 0.05;
}

function refine(edges: readonly Edge[], start: Steps): Steps {
  let steps = start;
  for (let round = 0; round < REFINEMENTS; round++) {
    // Loose at first; then what fits badly for this grid, such as rows of windows, shapes it less and less.
    const scale = round < 2 ? LARGEST_MISFIT_SCALE : misfitScale(edges, steps);
    const sums = { cc: 0, cr: 0, rr: 0, cx: 0, cy: 0, rx: 0, ry: 0 };
    for (const edge of edges) {
      const { columns, rows, misfit } = inSteps(edge, steps);
      const weight = edge.weight * Math.exp(-((misfit / scale) ** 2));
      sums.cc += weight * columns * columns;
      sums.cr += weight * columns * rows;
      sums.rr += weight * rows * rows;
      sums.cx += weight * columns * edge.x;
      sums.cy += weight * columns * edge.y;
      sums.rx += weight * rows * edge.x;
      sums.ry += weight * rows * edge.y;
    }
    steps = solveSteps(sums, steps);
  }
  return steps;
}

interface Sums {
  readonly cc: number;
  readonly cr: number;
  readonly rr: number;
  readonly cx: number;
  readonly cy: number;
  readonly rx: number;
  readonly ry: number;
}

function solveSteps({ cc, cr, rr, cx, cy, rx, ry }: Sums, before: Steps): Steps {
  const determinant = cc * rr - cr * cr;
  if (determinant > 1e-9 * cc * rr) {
    return {
      right: { x: (rr * cx - cr * rx) / determinant, y: (rr * cy - cr * ry) / determinant },
      down: { x: (cc * rx - cr * cx) / determinant, y: (cc * ry - cr * cy) / determinant },
    };
  }
  // All edges run one way (a single line): the other step stays as assumed.
  if (cc > 0 && rr === 0) return { right: { x: cx / cc, y: cy / cc }, down: before.down };
  if (rr > 0 && cc === 0) return { right: before.right, down: { x: rx / rr, y: ry / rr } };
  return before;
}

export interface WholeSteps {
  readonly columns: number;
  readonly rows: number;
  /** What is left over, in steps. */
  readonly misfit: number;
}

/** Stacks that follow each other are usually neighbours: they are taken so if that fits only this much worse. Our own. */
const NEIGHBOUR_ALLOWANCE = 0.3;
const LARGEST_NEIGHBOUR_MISFIT = 0.6;

/** An edge as whole steps. Edges between stacks shot one after the other lean towards a single step. */
export function inSteps(edge: Pick<Edge, "a" | "b" | "x" | "y">, { right, down }: Steps): WholeSteps {
  const determinant = right.x * down.y - right.y * down.x;
  const across = (edge.x * down.y - edge.y * down.x) / determinant;
  const downward = (right.x * edge.y - right.y * edge.x) / determinant;
  const nearest = wholeSteps(across, downward);
  if (Math.abs(edge.b - edge.a) !== 1 || Math.abs(nearest.columns) + Math.abs(nearest.rows) === 1) return nearest;
  const isAcross = Math.abs(across) >= Math.abs(downward);
  const single = isAcross
    ? { columns: Math.sign(across), rows: 0, misfit: Math.hypot(Math.abs(across) - 1, downward) }
    : { columns: 0, rows: Math.sign(downward), misfit: Math.hypot(across, Math.abs(downward) - 1) };
  const isNear = single.misfit <= Math.min(LARGEST_NEIGHBOUR_MISFIT, nearest.misfit + NEIGHBOUR_ALLOWANCE);
  return isNear ? single : nearest;
}

function wholeSteps(across: number, downward: number): WholeSteps {
  // Adding 0 turns -0 into 0.
  const columns = Math.round(across) + 0;
  const rows = Math.round(downward) + 0;
  return { columns, rows, misfit: Math.hypot(across - columns, downward - rows) };
}

/** Misfit in steps at which an edge counts 1/e, from the median misfit of the edges by weight. */
export function misfitScale(edges: readonly Edge[], steps: Steps): number {
  const moving = edges.filter((edge) => !edge.steps && Math.hypot(edge.x, edge.y) >= LARGEST_SAME_PLACE);
  const misfits = moving.map((edge) => ({ misfit: inSteps(edge, steps).misfit, weight: edge.weight }));
  misfits.sort((a, b) => a.misfit - b.misfit);
  let left = misfits.reduce((sum, { weight }) => sum + weight, 0) / 2;
  const usual = misfits.find(({ weight }) => (left -= weight) <= 0)?.misfit ?? LARGEST_MISFIT_SCALE;
  return Math.min(LARGEST_MISFIT_SCALE, Math.max(LEAST_MISFIT_SCALE, USUAL_MISFITS * usual));
}
