import type { Deviation } from "./frame-deviations";
import type { FrameSharpness } from "./frame-sharpness";
import { mode } from "./robust";
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

/** Usual number of frames of a stack; 1 where there is none. */
export function usualSizeOf(stacks: readonly StackDraft[]): number {
  // Frames, not stacks, are counted: a handful of single strays must not outvote a few whole stacks.
  return mode(stacks.flatMap((stack) => stack.frames.map(() => stack.frames.length))) ?? 1;
}

/** True for a stack of half the usual frames or less, where that means something. */
export function isFew(stack: StackDraft, usualSize: number): boolean {
  return usualSize >= 3 && stack.frames.length * 2 <= usualSize;
}
