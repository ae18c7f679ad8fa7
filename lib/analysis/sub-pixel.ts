/**
 * Where the maximum of a parabola through three equally spaced values lies.
 * @param before - value one step before the middle
 * @param middle - the highest of the three
 * @param after - value one step after the middle
 * @returns offset from the middle in steps, -0.5 to 0.5
 * Method and accuracy: exact for a parabola; on correlation peaks a few hundredths of a pixel.
 * Edges: three equal values, or a middle that is not the highest, give at most half a step; NaN gives NaN.
 * Source: definition.
 */
export function parabolaOffset(before: number, middle: number, after: number): number {
  const curvature = before - 2 * middle + after;
  if (curvature >= 0) return 0;
  return Math.max(-0.5, Math.min(0.5, (before - after) / (2 * curvature)));
}
