import { seamKey } from "@/lib/board/changes";
import { currentSeams, unmeasuredSeams } from "@/lib/board/current-seams";
import { findElsewhere, findHosts, sharpnessApart } from "@/lib/board/find-elsewhere";
import { framesOf } from "@/lib/board/look-up";
import { type Measured, type MeasuredStack, seamStates, stackStates, statesOf } from "@/lib/board/measured";
import { askElsewhere, askMisfits, isUnmatched, misfitKey } from "@/lib/board/measured-questions";
import type { Board, BoardFrame, BoardSeam, BoardStack } from "@/lib/board/model";
import { areBracketed, chainShifts, stackSharpness } from "@/lib/sorting/appraise-stack";
import type { FrameDraft, Shift, StackDraft } from "@/lib/sorting/draft";
import { makeEdge } from "@/lib/sorting/edges";
import { overlapAt } from "@/lib/sorting/find-seams";
import { tellingSpot } from "@/lib/sorting/frame-sharpness";
import { isMatch, isTextured } from "@/lib/sorting/judge-pair";
import { noiseFloorOf } from "@/lib/sorting/noise-floor";
import { PairStore } from "@/lib/sorting/pair-store";
import { median } from "@/lib/sorting/robust";
import type { MeasurePair, ProposedQuestion, SortFrame } from "@/lib/sorting/types";
import type { Vector } from "@/lib/sorting/vector";

export interface MeasuringInput {
  readonly board: Board;
  /** Measurements of every frame of the board. */
  readonly frames: readonly SortFrame[];
  /** Stacks whose frames or reference changed; those that are gone are passed over. */
  readonly stackIds: readonly string[];
  readonly measurePair: MeasurePair;
  readonly softLimit: number;
  /** Keys of questions that were answered. */
  readonly settledQuestionKeys: readonly string[];
}

/** A position that the neighbours contradict by more than this, in long sides, is stale. Our own, as in the sorting. */
const STALE_POSITION = 0.1;
/** A neighbour lies this far off the line at the most, in sides of a frame; further it is no neighbour to that side. */
const MOST_ASIDE = 0.5;
const MOST_STEP = 1.3;
const LEAST_STEP = 0.05;

/**
 * Measures what people's commands left unmeasured: sharpness and shift within the stacks that changed, and the overlap
 * of neighbours that are new or whose frames changed. Nothing is decided; who is soft or has moved people have seen. What does not
 * belong where people put it is asked about.
 * Pairs asked for: about one a frame of these stacks, and one a seam.
 */
export async function measureStacks(input: MeasuringInput): Promise<Measured> {
  const { board, softLimit } = input;
  const known = new Map(input.frames.map((frame) => [frame.id, frame]));
  const store = new PairStore(input.frames, input.measurePair);
  const sortFrames = (stackId: string) => framesOf(board, stackId).flatMap(({ id }) => known.get(id) ?? []);
  const isBracketed = areBracketed(board.stacks.map(({ id }) => sortFrames(id)));
  const noise = noiseFloorOf(input.frames);
  const touched = new Set(input.stackIds);
  const drafts = new Map<string, StackDraft>();
  const elsewhere = new Map<string, ReadonlySet<string>>();
  for (const stack of board.stacks) {
    const frames = framesOf(board, stack.id);
    const sources = sortFrames(stack.id);
    if (sources.length === 0 || sources.length < frames.length) continue;
    const draft = draftOf(stack, frames, sources, drafts.size);
    drafts.set(stack.id, draft);
    if (!touched.has(stack.id)) continue;
    const shifts = await measureShifts(sources, draft.hub, store);
    const byPerson = new Set(frames.flatMap(({ id, placedBy }) => (placedBy === "person" ? [id] : [])));
    const odd = await findElsewhere(draft, shifts, store, (id) => byPerson.has(id));
    elsewhere.set(stack.id, odd);
    const sharpness = sharpnessApart(sources, odd, (some) => {
      return stackSharpness({ frames: some, softLimit, isBracketed, noise });
    });
    const measured = draft.frames.map((entry, at): FrameDraft => {
      return { ...entry, shift: shifts[at] ?? null, sharpness: sharpness[at] ?? entry.sharpness };
    });
    drafts.set(stack.id, { ...draft, frames: measured });
  }
  const missing = new Set(unmeasuredSeams(board).map(seamKey));
  const wanted = currentSeams(board).filter((seam) => {
    return touched.has(seam.stackId) || touched.has(seam.neighbourId) || missing.has(seamKey(seam));
  });
  const seams = await measureSeams(board, wanted, drafts, store);
  const positions = positionsOf(board, seams, touched);
  const states = stackStates(board);
  const questions: ProposedQuestion[] = askMisfits(board, misfitsOf(board, seams, drafts), input.settledQuestionKeys);
  for (const stack of board.stacks) {
    const odd = elsewhere.get(stack.id);
    if (!odd || odd.size === 0) continue;
    questions.push(
      ...askElsewhere(stack, await findHosts(board, stack, odd, { drafts, store }), input.settledQuestionKeys),
    );
  }
  return {
    questions: questions.map((question) => ({ ...question, states: statesOf(question, states) })),
    stacks: [...drafts.values()]
      .filter(({ id }) => touched.has(id))
      .map((draft) => toMeasured(draft, states.get(draft.id) ?? "", positions.get(draft.id))),
    seams: seams.map(({ seam }) => ({ ...seam, states: seamStates(seam, states) })),
  };
}

/** The stack as it is on the board, in the engine's terms. */
function draftOf(
  stack: BoardStack,
  frames: readonly BoardFrame[],
  sources: readonly SortFrame[],
  index: number,
): StackDraft {
  const reference = sources.find(({ id }) => id === stack.referenceId) ?? null;
  const hub = reference ?? sources[0];
  if (!hub) throw new RangeError("a stack needs one frame or more");
  const entries = frames.map((frame, at): FrameDraft => ({
    frame: sources[at] ?? hub,
    sharpness: { score: 0, detail: 0, verdict: "cannot tell", relative: frame.relativeSharpness },
    deviation: null,
    setAside: frame.setAside,
    isSettled: true,
    shift: frame.shift,
  }));
  return { index, id: stack.id, fixed: null, frames: entries, hub, reference };
}

/** Against the reference: from frame to frame as the sorting does, and directly where that chain is broken. */
async function measureShifts(
  frames: readonly SortFrame[],
  hub: SortFrame,
  store: PairStore,
): Promise<(Shift | null)[]> {
  await store.measureAll(frames.slice(1).map((frame, at) => [frames[at]?.id ?? "", frame.id] as const));
  const chain = chainShifts(frames, store);
  const origin = chain[frames.indexOf(hub)] ?? null;
  const against = frames.map((frame, at): Shift | null => {
    const own = chain[at] ?? null;
    if (frame === hub) return { xPx: 0, yPx: 0 };
    return own && origin ? { xPx: own.xPx - origin.xPx + 0, yPx: own.yPx - origin.yPx + 0 } : null;
  });
  const open = frames.filter((_, at) => against[at] === null);
  await store.measureAll(open.map((frame) => [hub.id, frame.id] as const));
  return frames.map((frame, at) => {
    if (against[at]) return against[at];
    const measure = store.find(hub.id, frame.id);
    return measure && isMatch(measure, hub) ? { xPx: measure.xPx, yPx: measure.yPx } : null;
  });
}

/** All seams whose pictures have something to match and do not: those measured now, and those measured before. */
function misfitsOf(
  board: Board,
  fresh: readonly MeasuredSeam[],
  drafts: ReadonlyMap<string, StackDraft>,
): readonly BoardSeam[] {
  const now = new Map(fresh.map(({ seam }) => [misfitKey(seam), seam]));
  const isTelling = (id: string) => {
    const draft = drafts.get(id);
    return draft !== undefined && isTextured(draft.hub);
  };
  return currentSeams(board)
    .map((seam) => now.get(misfitKey(seam)) ?? seam)
    .filter((seam) => isUnmatched(seam) && isTelling(seam.stackId) && isTelling(seam.neighbourId));
}

interface MeasuredSeam {
  readonly seam: BoardSeam;
  /** Corner of the neighbour's reference in this one's, full-size px; null: the pictures do not say. */
  readonly step: Shift | null;
}

async function measureSeams(
  board: Board,
  wanted: readonly BoardSeam[],
  drafts: ReadonlyMap<string, StackDraft>,
  store: PairStore,
): Promise<MeasuredSeam[]> {
  const pairs = wanted.flatMap((seam) => {
    const [a, b] = [drafts.get(seam.stackId), drafts.get(seam.neighbourId)];
    return a && b ? [{ seam, a, b }] : [];
  });
  await store.measureAll(pairs.map(({ a, b }) => [a.hub.id, b.hub.id] as const));
  const stacks = new Map(board.stacks.map((stack) => [stack.id, stack]));
  return pairs.map(({ seam, a, b }) => {
    const direct = directStep(a, b, seam.side, store);
    const solved = solvedStep(stacks.get(a.id), stacks.get(b.id), a.hub);
    const isSolved = solved !== null && isBeside(solved, seam.side, a.hub);
    const step = isSolved && !isConfirmed(solved, direct, [stacks.get(a.id), stacks.get(b.id)]) ? solved : direct;
    const longSidePx = longSideOf(a.hub);
    return {
      seam: { ...seam, overlap: step && overlapAt(step, seam.side, a, b) },
      step: step && { xPx: step.x * longSidePx, yPx: step.y * longSidePx },
    };
  });
}

/** Two that people left where they were computed lie as all pictures together say, also against a single false match. */
function isConfirmed(solved: Vector, direct: Vector | null, stacks: readonly (BoardStack | undefined)[]): boolean {
  if (!direct) return false;
  const isComputed = stacks.every((stack) => stack?.placedBy === "computation");
  return !isComputed || Math.hypot(solved.x - direct.x, solved.y - direct.y) <= STALE_POSITION;
}

function solvedStep(a: BoardStack | undefined, b: BoardStack | undefined, hub: SortFrame): Vector | null {
  if (!a?.position || !b?.position) return null;
  const longSidePx = longSideOf(hub);
  return { x: (b.position.xPx - a.position.xPx) / longSidePx, y: (b.position.yPx - a.position.yPx) / longSidePx };
}

function longSideOf({ measurements }: Pick<SortFrame, "measurements">): number {
  return Math.max(measurements.widthPx, measurements.heightPx);
}

/** The clearest of the measured shifts that puts b where it is to be beside a, in long sides. */
function directStep(a: StackDraft, b: StackDraft, side: BoardSeam["side"], store: PairStore): Vector | null {
  const measure = store.find(a.hub.id, b.hub.id);
  const edge = measure && makeEdge({ index: 0, frame: a.hub }, { index: 1, frame: b.hub }, measure);
  if (!edge || edge.isFaint) return null;
  return [{ x: edge.x, y: edge.y }, ...edge.rivals].find((step) => isBeside(step, side, a.hub)) ?? null;
}

function isBeside(step: Vector, side: BoardSeam["side"], { measurements }: Pick<SortFrame, "measurements">): boolean {
  const longSidePx = longSideOf({ measurements });
  const [across, down] = [(step.x * longSidePx) / measurements.widthPx, (step.y * longSidePx) / measurements.heightPx];
  const [along, aside] = side === "right" ? [across, down] : [down, across];
  return along >= LEAST_STEP && along <= MOST_STEP && Math.abs(aside) <= MOST_ASIDE;
}

/** Of the stacks that changed, where their neighbours' pictures put them; left out: as before, or not known. */
function positionsOf(
  board: Board,
  seams: readonly MeasuredSeam[],
  touched: ReadonlySet<string>,
): ReadonlyMap<string, Shift> {
  const stacks = new Map(board.stacks.map((stack) => [stack.id, stack]));
  const found = new Map<string, Shift[]>();
  const say = (id: string, from: Shift | null | undefined, step: Shift, sign: 1 | -1) => {
    if (!touched.has(id) || !from) return;
    found.set(id, [...(found.get(id) ?? []), { xPx: from.xPx + sign * step.xPx, yPx: from.yPx + sign * step.yPx }]);
  };
  for (const { seam, step } of seams) {
    if (!step) continue;
    const [a, b] = [stacks.get(seam.stackId), stacks.get(seam.neighbourId)];
    if (b && !touched.has(b.id)) say(seam.stackId, b.position, step, -1);
    if (a && !touched.has(a.id)) say(seam.neighbourId, a.position, step, 1);
  }
  const widthPx = board.frames[0] ? Math.max(board.frames[0].widthPx, board.frames[0].heightPx) : 1;
  return new Map(
    [...found].flatMap(([id, said]) => {
      const position = { xPx: median(said.map(({ xPx }) => xPx)), yPx: median(said.map(({ yPx }) => yPx)) };
      const known = stacks.get(id)?.position;
      const isStale =
        !known || Math.hypot(known.xPx - position.xPx, known.yPx - position.yPx) > STALE_POSITION * widthPx;
      return isStale ? [[id, position] as const] : [];
    }),
  );
}

function toMeasured({ id, frames, reference }: StackDraft, state: string, position: Shift | undefined): MeasuredStack {
  return {
    id,
    state,
    frames: frames.map(({ frame, sharpness, shift }) => ({
      id: frame.id,
      relativeSharpness: sharpness.relative,
      shift,
    })),
    spot: tellingSpot(reference ?? undefined),
    ...(position && { position }),
  };
}
