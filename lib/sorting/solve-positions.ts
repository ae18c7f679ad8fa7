import type { Vector } from "./vector";

/** Wanted difference of two positions: position[b] - position[a]. */
export interface PositionEdge {
  readonly a: number;
  readonly b: number;
  readonly x: number;
  readonly y: number;
  readonly weight: number;
}

const MOST_ROUNDS = 400;
const ACCURACY = 1e-7;

/**
 * Positions that fit the wanted differences best by weighted least squares.
 * @param start - first guess by index; the mean of a connected set stays where the guess has it
 * @returns a position for each index
 * **Method and accuracy**: conjugate gradients on the normal equations (a graph Laplacian), to 1e-7 of the edges' unit.
 */
export function solvePositions(start: readonly Vector[], edges: readonly PositionEdge[]): Vector[] {
  const x = solveAxis(
    start.map((position) => position.x),
    edges,
    (edge) => edge.x,
  );
  const y = solveAxis(
    start.map((position) => position.y),
    edges,
    (edge) => edge.y,
  );
  return start.map((position, index) => ({ x: x[index] ?? position.x, y: y[index] ?? position.y }));
}

function solveAxis(
  start: readonly number[],
  edges: readonly PositionEdge[],
  wanted: (edge: PositionEdge) => number,
): number[] {
  const apply = (values: readonly number[]): number[] => {
    const out = new Array<number>(values.length).fill(0);
    for (const { a, b, weight } of edges) {
      const flow = weight * ((values[b] ?? 0) - (values[a] ?? 0));
      out[b] = (out[b] ?? 0) + flow;
      out[a] = (out[a] ?? 0) - flow;
    }
    return out;
  };
  const right = new Array<number>(start.length).fill(0);
  for (const edge of edges) {
    right[edge.b] = (right[edge.b] ?? 0) + edge.weight * wanted(edge);
    right[edge.a] = (right[edge.a] ?? 0) - edge.weight * wanted(edge);
  }
  const solution = [...start];
  let rest = apply(solution).map((value, index) => (right[index] ?? 0) - value);
  let direction = [...rest];
  let power = dot(rest, rest);
  for (let round = 0; round < Math.min(MOST_ROUNDS, start.length * 4) && power > ACCURACY ** 2; round++) {
    const image = apply(direction);
    const curvature = dot(direction, image);
    if (curvature <= 0) break;
    const step = power / curvature;
    direction.forEach((value, index) => (solution[index] = (solution[index] ?? 0) + step * value));
    rest = rest.map((value, index) => value - step * (image[index] ?? 0));
    const next = dot(rest, rest);
    direction = rest.map((value, index) => value + (next / power) * (direction[index] ?? 0));
    power = next;
  }
  return solution;
}

function dot(a: readonly number[], b: readonly number[]): number {
  return a.reduce((sum, value, index) => sum + value * (b[index] ?? 0), 0);
}
