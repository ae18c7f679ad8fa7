import type { Plane } from "@/lib/analysis/types";

/** A measurement was asked of something that it cannot be taken from. */
export class AnalysisError extends Error {
  override readonly name = "AnalysisError";
}

/**
 * Checks that a plane holds as many values as its sides say.
 * @throws AnalysisError naming what was expected and what came
 */
export function assertPlane(plane: Plane, leastSidePx = 1): void {
  const { data, widthPx, heightPx } = plane;
  for (const [name, side] of Object.entries({ widthPx, heightPx })) {
    if (!Number.isInteger(side) || side < leastSidePx) {
      throw new AnalysisError(`${name} must be a whole number of ${leastSidePx} or more, got ${side}`);
    }
  }
  if (data.length !== widthPx * heightPx) {
    throw new AnalysisError(`data must hold ${widthPx} x ${heightPx} values, got ${data.length}`);
  }
}
