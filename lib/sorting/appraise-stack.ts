import type { FrameDraft, Shift, StackDraft } from "./draft";
import { findDeviations, lightOf, type Deviation } from "./frame-deviations";
import { frameSharpness, type FrameSharpness } from "./frame-sharpness";
import { isMatch } from "./judge-pair";
import type { NoiseFloor } from "./noise-floor";
import type { PairStore } from "./pair-store";
import type { FixedStack, SetAsideReason, SortFrame } from "./types";

export interface AppraisalInput {
  readonly index: number;
  readonly id: string;
  readonly fixed: FixedStack | null;
  /** In the order taken, one or more. */
  readonly frames: readonly SortFrame[];
  readonly store: PairStore;
  readonly softLimit: number;
  /** Set aside or brought back by a person. */
  readonly settled: Readonly<Record<string, SetAsideReason | null>>;
  /** True where every tile was bracketed: unequal exposure is then meant. */
  readonly isBracketed: boolean;
  /** Of the whole shoot. */
  readonly noise: NoiseFloor;
}

/** A stack is a bracket where its settings span this much light or more. Our own. */
const LEAST_BRACKET_EV = 0.6;

/** Settings closer than this are one level of a bracket: a third of a stop, the finest step of most cameras. */
const BRACKET_LEVEL_EV = 1 / 3;

/** Judges the frames of one stack against each other and chooses its reference. */
export function appraiseStack(input: AppraisalInput): StackDraft {
  const { frames, store } = input;
  const sharpness = stackSharpness(input);
  const chain = chainShifts(frames, store);
  const deviations = findDeviations(frames, chain).map((deviation) =>
    input.isBracketed && deviation?.kind === "exposure" ? null : deviation,
  );
  const setAside = keepSome(
    frames.map((frame, at) => reasonFor(frame, sharpness[at], deviations[at], input)),
    frames.map((frame) => Object.hasOwn(input.settled, frame.id)),
  );
  const chosen = frames.find((frame, at) => frame.id === input.fixed?.referenceId && setAside[at] === null);
  const reference = chosen ?? chooseReference(frames, sharpness, setAside);
  const hub = reference ?? frames[0];
  if (!hub) throw new RangeError("a stack needs one frame or more");
  const origin = chain[frames.indexOf(hub)] ?? null;
  const drafts = frames.map((frame, at): FrameDraft => {
    const own = chain[at] ?? null;
    return {
      frame,
      sharpness: sharpness[at] ?? { score: 0, detail: 0, verdict: "cannot tell", relative: null },
      deviation: deviations[at] ?? null,
      setAside: setAside[at] ?? null,
      isSettled: Object.hasOwn(input.settled, frame.id),
      shift: own && origin ? { xPx: own.xPx - origin.xPx + 0, yPx: own.yPx - origin.yPx + 0 } : null,
    };
  });
  return { index: input.index, id: input.id, fixed: input.fixed, frames: drafts, hub, reference };
}

/** How sharp each frame of a stack is against the others, in the same order. */
export function stackSharpness(
  input: Pick<AppraisalInput, "frames" | "softLimit" | "isBracketed" | "noise">,
): FrameSharpness[] {
  return input.isBracketed ? bracketSharpness(input) : frameSharpness(input.frames, input.softLimit, input.noise);
}

/** Frames of unlike exposure differ in sharpness by their light alone, so each is compared with its equals only. */
function bracketSharpness({
  frames,
  softLimit,
  noise,
}: Pick<AppraisalInput, "frames" | "softLimit" | "noise">): FrameSharpness[] {
  const levels = frames.map((frame) => Math.round((lightOf(frame) ?? 0) / BRACKET_LEVEL_EV));
  const judged = new Map<SortFrame, FrameSharpness>();
  for (const level of new Set(levels)) {
    const equals = frames.filter((_, at) => levels[at] === level);
    frameSharpness(equals, softLimit, noise).forEach((sharpness, at) => {
      const frame = equals[at];
      if (frame) judged.set(frame, sharpness);
    });
  }
  return frames.map((frame) => judged.get(frame) ?? { score: 0, detail: 0, verdict: "cannot tell", relative: null });
}

function reasonFor(
  frame: SortFrame,
  sharpness: FrameSharpness | undefined,
  deviation: Deviation | null | undefined,
  { settled }: AppraisalInput,
): SetAsideReason | null {
  if (Object.hasOwn(settled, frame.id)) return settled[frame.id] ?? null;
  if (deviation?.isCertain) return deviation.kind === "exposure" ? "exposure" : "moved";
  return sharpness?.verdict === "soft" ? "soft" : null;
}

/** Never empties a stack by computation; what a person set aside stays so. */
function keepSome(
  reasons: readonly (SetAsideReason | null)[],
  areSettled: readonly boolean[],
): (SetAsideReason | null)[] {
  if (reasons.some((reason) => reason === null)) return [...reasons];
  return reasons.map((reason, at) => (areSettled[at] ? reason : null));
}

/** The frame in use with the most detail; where sharpness cannot be told, the one with the largest Laplacian variance. */
function chooseReference(
  frames: readonly SortFrame[],
  sharpness: readonly FrameSharpness[],
  setAside: readonly (SetAsideReason | null)[],
): SortFrame | null {
  let best: { frame: SortFrame; detail: number } | null = null;
  frames.forEach((frame, at) => {
    if (setAside[at] !== null) return;
    const entry = sharpness[at];
    const canTell = entry !== undefined && entry.verdict !== "cannot tell";
    const detail = canTell ? entry.detail : Math.log(frame.measurements.laplacianVariance + 1e-9) - 1e6;
    if (!best || detail > best.detail) best = { frame, detail };
  });
  return (best as { frame: SortFrame } | null)?.frame ?? null;
}

/** Where each frame lies against the first one, added up from frame to frame; null after a pair that does not match. */
export function chainShifts(frames: readonly SortFrame[], store: PairStore): (Shift | null)[] {
  const shifts: (Shift | null)[] = [];
  frames.forEach((frame, at) => {
    if (at === 0) return shifts.push({ xPx: 0, yPx: 0 });
    for (let back = at - 1; back >= 0; back--) {
      const before = frames[back];
      const origin = shifts[back];
      const measure = before && origin ? store.find(before.id, frame.id) : null;
      if (!before || !origin || !measure || !isMatch(measure, before)) continue;
      return shifts.push({ xPx: origin.xPx + measure.xPx, yPx: origin.yPx + measure.yPx });
    }
    return shifts.push(null);
  });
  return shifts;
}

/** True where most stacks were taken with unequal settings on purpose. */
export function areBracketed(stacks: readonly (readonly SortFrame[])[]): boolean {
  const several = stacks.filter((frames) => frames.length >= 2);
  const bracketed = several.filter((frames) => {
    const lights = frames.flatMap((frame) => lightOf(frame) ?? []);
    return lights.length >= 2 && Math.max(...lights) - Math.min(...lights) >= LEAST_BRACKET_EV;
  });
  return bracketed.length >= 2 && bracketed.length * 2 > several.length;
}
