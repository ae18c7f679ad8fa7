import { agreesWithPlaces } from "./find-positions";
import type { FrameDraft, StackDraft } from "./draft";
import type { Edge } from "./edges";
import { trustIn } from "./lattice";
import { inSteps, misfitScale } from "./lattice-steps";
import { tellingSpot } from "./frame-sharpness";
import { shiftFraction } from "./judge-pair";
import { pauseSeconds } from "./pauses";
import { questionsOfFrames } from "./questions-of-frames";
import { questionsOfGrid } from "./questions-of-grid";
import { isKept, nameOf, percent, tileOf, type SortedDraft } from "./sorted-draft";
import type { Join } from "./split-stacks";
import type { Proposal, ProposedFrame, ProposedStack, SortFacts, SortFrame } from "./types";
import { findShotOrder } from "./walks";

/** Raised whenever the same input may give another proposal. */
export const ENGINE_VERSION = "1";

/** Puts what was found out into the proposal, with a reason for everything and a question for every doubt. */
export function writeProposal(draft: SortedDraft, facts: SortFacts): Proposal {
  const kept = draft.stacks.filter((stack) => isKept(draft, stack));
  const settled = new Set(facts.settledQuestionKeys);
  const questions = [...questionsOfFrames(draft), ...questionsOfGrid(draft)]
    .filter((question) => !settled.has(question.key))
    .sort((a, b) => b.severity - a.severity || (a.key < b.key ? -1 : 1));
  return {
    engineVersion: ENGINE_VERSION,
    ...gridSize(draft, facts),
    shotOrder: shotOrderOf(draft),
    stacks: kept.map((stack) => writeStack(draft, stack, draft.positions[stack.index] ?? null)),
    frames: writeFrames(draft, kept, facts),
    seams: draft.seams.map((seam) => ({
      stackId: draft.stacks[seam.a]?.id ?? "",
      neighbourId: draft.stacks[seam.b]?.id ?? "",
      side: seam.side,
      overlap: seam.overlap,
    })),
    questions,
    longestPauseSeconds: draft.split.limit?.seconds ?? null,
  };
}

/** As far as stacks lie, and no smaller than it was, lines found before the first one added. */
function gridSize({ stacks, places }: SortedDraft, { grid }: SortFacts): Pick<Proposal, "rows" | "columns"> {
  const most = (axis: "row" | "column", known: number | undefined): number => {
    const fixed = stacks.find((stack) => stack.fixed?.[axis]);
    const found = fixed ? (places[fixed.index]?.[axis] ?? 0) - (fixed.fixed?.[axis] ?? 0) : 0;
    return places.reduce((last, place) => Math.max(last, place[axis] ?? 0), known === undefined ? 0 : known + found);
  };
  return { rows: most("row", grid?.rows), columns: most("column", grid?.columns) };
}

function shotOrderOf(draft: SortedDraft): Proposal["shotOrder"] {
  const bodies = draft.bodies.map((list) =>
    list.flatMap((index) => {
      const { row, column } = draft.places[index] ?? {};
      return row && column && draft.takes[index]?.take === 1 ? [{ row, column }] : [];
    }),
  );
  return findShotOrder(bodies);
}

function writeStack(draft: SortedDraft, stack: StackDraft, position: ProposedStack["position"]): ProposedStack {
  const { row, column } = draft.places[stack.index] ?? { row: null, column: null };
  const { take, isChosenTake } = draft.takes[stack.index] ?? { take: 1, isChosenTake: true };
  return {
    id: stack.id,
    frameIds: stack.frames.map(({ frame }) => frame.id),
    row,
    column,
    take,
    isChosenTake,
    referenceId: stack.reference?.id ?? null,
    ...placeReason(draft, stack),
    position,
    spot: tellingSpot(stack.reference ?? undefined),
  };
}

/** How much heavier a contradicting edge weighs than an agreeing one. Our own. */
const DOUBT_FACTOR = 1.5;
/** Squared weight of agreeing edges that leaves an even chance: an edge just above chance. Our own. */
const EVEN_CHANCE = 4;

function placeReason(draft: SortedDraft, stack: StackDraft): { confidence: number; reason: string } {
  const spot = draft.layout.spots[stack.index];
  if (draft.places[stack.index]?.row === null && stack.fixed?.byPerson) {
    return { confidence: 1, reason: "Left without a place by a person." };
  }
  if (draft.places[stack.index]?.row === null) return { confidence: 0, reason: "Nothing tells where it belongs." };
  if (spot?.basis === "fixed") {
    const isPerson = stack.fixed?.byPerson === true;
    return {
      confidence: isPerson ? 1 : 0.99,
      reason: isPerson ? "Placed by a person." : "Placed by an earlier sorting.",
    };
  }
  if (draft.stacks.length === 1) return { confidence: 0.9, reason: "The only stack." };
  const own = draft.graph.edges.filter((edge) => edge.a === stack.index || edge.b === stack.index);
  const agreeing = own.filter((edge) => agreesWithPlaces(edge, draft.graph, draft.places));
  if (agreeing.length === 0) {
    const doubt = spot?.isUnsure
      ? "The order shot leaves more than one place for it"
      : "The order shot leaves one place for it";
    return { confidence: spot?.isUnsure ? 0.6 : 0.93, reason: `${doubt}; it shows too little detail to be matched.` };
  }
  const scale = misfitScale(draft.graph.edges, draft.graph.steps);
  const sum = (edges: readonly Edge[]) =>
    edges.reduce((total, edge) => total + edge.weight * trustIn(edge, inSteps(edge, draft.graph.steps), scale), 0);
  const [yes, all] = [sum(agreeing), sum(own)];
  const against = DOUBT_FACTOR * (all - yes);
  const best = [...agreeing].sort((a, b) => b.weight - a.weight).slice(0, 2);
  const names = best.map((edge) => nameOf(draft, edge.a === stack.index ? edge.b : edge.a));
  return {
    confidence: Math.min(0.995, yes ** 2 / (yes ** 2 + against ** 2 + EVEN_CHANCE)),
    reason: `Its picture matches ${names.join(" and ")} at the shift expected there.`,
  };
}

function writeFrames(draft: SortedDraft, kept: readonly StackDraft[], facts: SortFacts): ProposedFrame[] {
  const homes = new Map<string, { stack: StackDraft; entry: FrameDraft }>();
  for (const stack of kept) for (const entry of stack.frames) homes.set(entry.frame.id, { stack, entry });
  return draft.order.map((frame, orderTaken): ProposedFrame => {
    const home = homes.get(frame.id);
    const before = draft.order[orderTaken - 1];
    const pauseBeforeSeconds = before ? pauseSeconds(before, frame) : null;
    const common = { id: frame.id, orderTaken, pauseBeforeSeconds };
    if (!home) return { ...common, ...looseFrame(draft, frame, facts) };
    const { entry, stack } = home;
    return {
      ...common,
      stackId: stack.id,
      setAside: entry.setAside,
      relativeSharpness: entry.sharpness.relative,
      shift: entry.shift,
      ...frameReason(draft, stack, entry),
    };
  });
}

type LooseFrame = Omit<ProposedFrame, "id" | "orderTaken" | "pauseBeforeSeconds">;

function looseFrame(draft: SortedDraft, frame: SortFrame, { setAside }: SortFacts): LooseFrame {
  const isBlack = draft.black.has(frame.id);
  const byPerson = Object.hasOwn(setAside, frame.id);
  return {
    stackId: null,
    setAside: byPerson ? (setAside[frame.id] ?? null) : isBlack ? "stray" : null,
    relativeSharpness: null,
    shift: null,
    confidence: isBlack ? 0.99 : 0.8,
    reason: isBlack ? "It is black all over." : "It matches no stack.",
  };
}

const CONFIDENCE: Readonly<Record<Join["basis"], number>> = {
  person: 1,
  "pictures and time": 0.995,
  pictures: 0.97,
  time: 0.9,
  count: 0.75,
  nothing: 0.5,
};

function frameReason(draft: SortedDraft, stack: StackDraft, entry: FrameDraft): { confidence: number; reason: string } {
  if (stack.fixed?.byPerson) return { confidence: 1, reason: "Put here by a person." };
  const join = draft.split.joins.get(entry.frame.id);
  if (!join) return { confidence: 0.97, reason: "The first of its stack." };
  const { name } = join.before;
  const pause = join.pauseS === null ? "at an unknown time" : `${formatSeconds(join.pauseS)} later`;
  const isMatched = join.verdict === "same" || join.verdict === "different";
  const shift = isMatched
    ? `shifted by ${percent(shiftFraction(join.measure, join.before))}`
    : "with too little detail to compare";
  const px = Math.round(Math.hypot(join.measure.xPx, join.measure.yPx));
  const text = join.isSame
    ? `With ${name} before it: ${pause}, ${isMatched ? `${px} px of shift` : shift}.`
    : `Begins ${tileOf(draft, stack.index) ?? "a stack"} after ${name}: ${pause}, ${shift}.`;
  return { confidence: CONFIDENCE[join.basis], reason: text };
}

function formatSeconds(seconds: number): string {
  if (seconds < 10) return `${seconds.toFixed(1)} s`;
  return seconds < 120 ? `${Math.round(seconds)} s` : `${Math.round(seconds / 60)} min`;
}
