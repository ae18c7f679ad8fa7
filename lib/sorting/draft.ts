import type { Deviation } from "./frame-deviations";
import type { FrameSharpness } from "./frame-sharpness";
import { mode, quantile } from "./robust";
import type { FixedStack, SetAsideReason, SortFrame } from "./types";

export interface Shift {
  readonly xPx: number;
  readonly yPx: number;
}

/** What was found out about one frame within its stack. */
export interface FrameDraft {
  readonly frame: SortFrame;
  readonly sharpness: FrameSharpness;
  readonly deviation: Deviation | null;
  readonly setAside: SetAsideReason | null;
  /** A person set it aside or brought it back. */
  readonly isSettled: boolean;
  /** Against the stack's reference; null where not measured. */
  readonly shift: Shift | null;
}

/** A stack on its way to the proposal. */
export interface StackDraft {
  readonly index: number;
  readonly id: string;
  readonly fixed: FixedStack | null;
  readonly frames: readonly FrameDraft[];
  /** What the others are registered against: the reference, or the first frame where none is in use. */
  readonly hub: SortFrame;
  readonly reference: SortFrame | null;
}

export function framesInUse(stack: StackDraft): FrameDraft[] {
  return stack.frames.filter((entry) => entry.setAside === null);
}

/** How many frames the stacks of a shoot have. */
export interface StackSizes {
  /** The usual number of frames; 1 where there is none. */
  readonly usual: number;
  /** Stacks of so many frames or fewer may be something else than a tile; 0 where size says nothing. */
  readonly few: number;
}

/** Share of the frames that must be in stacks about as large as the usual one for that to be usual. Our own. */
const LEAST_REGULAR = 0.6;
/** Where every tile has another number, this share of the frames is in the smallest ones. Our own. */
const SMALLEST_SHARE = 0.1;
const LEAST_USUAL = 3;

export function stackSizesOf(stacks: readonly StackDraft[]): StackSizes {
  // Frames, not stacks, are counted: a handful of single strays must not outvote a few whole stacks.
  const sizes = stacks.flatMap((stack) => stack.frames.map(() => stack.frames.length));
  const usual = mode(sizes) ?? 1;
  const alike = sizes.filter((size) => Math.abs(size / usual - 1) <= 1 / 3).length;
  const least = alike >= LEAST_REGULAR * sizes.length ? usual : quantile(sizes, SMALLEST_SHARE);
  return { usual, few: least >= LEAST_USUAL ? Math.floor(least / 2) : 0 };
}

/** True for a stack of half the usual frames or less, where that means something. */
export function isFew(stack: StackDraft, sizes: StackSizes): boolean {
  return stack.frames.length <= sizes.few;
}
