/** A shift or position in long sides of a frame; right and down positive. */
export interface Vector {
  readonly x: number;
  readonly y: number;
}

/** Shift in long sides under which two stacks show the same tile: as within a stack. Source: analysis.md, step 4. */
export const LARGEST_SAME_PLACE = 0.07;
