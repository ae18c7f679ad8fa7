import { agreesWithPlaces } from "./find-positions";
import type { FrameDraft, StackDraft } from "./draft";
import { tellingSpot } from "./frame-sharpness";
import { joinChance } from "./join-chances";
import { shiftFraction } from "./judge-pair";
import { pauseSeconds } from "./pauses";
import { placeChances } from "./place-chances";
import { doubtsOf } from "./gathered-key";
import { questionsBetween } from "./questions-between";
import { questionsOfFrames } from "./questions-of-frames";
import { questionsOfGrid } from "./questions-of-grid";
import { questionsOfPlaces } from "./questions-of-places";
import { isKept, nameOf, percent, tileOf, type SortedDraft } from "./sorted-draft";
import type { Proposal, ProposedFrame, ProposedStack, SortFacts, SortFrame } from "./types";
import { findShotOrder } from "./walks";

/** Nothing is surer without a person. Our own. */
const HIGHEST_CHANCE = 0.998;
/** A stack that may be two takes. */
const DOUBLED_CHANCE = 0.6;

/** Raised whenever the same input may give another proposal. */
export const ENGINE_VERSION = "3";

/** Puts what was found out into the proposal, with a reason for everything and a question for every doubt. */
export function writeProposal(draft: SortedDraft, facts: SortFacts): Proposal {
  const kept = draft.stacks.filter((stack) => isKept(draft, stack));
  const chances = placeChances(draft);
  const settled = new Set(facts.settledQuestionKeys.flatMap(doubtsOf));
  const questions = [
    ...questionsOfFrames(draft),
    ...questionsBetween(draft, settled),
    ...questionsOfPlaces(draft, chances),
    ...questionsOfGrid(draft, settled),
  ]
    .filter((question) => !settled.has(question.key))
    .sort((a, b) => b.severity - a.severity || (a.key < b.key ? -1 : 1));
  return {
    engineVersion: ENGINE_VERSION,
    ...gridSize(draft, facts),
    shotOrder: shotOrderOf(draft),
    stacks: kept.map((stack) => writeStack(draft, stack, chances[stack.index] ?? 0)),
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

function writeStack(draft: SortedDraft, stack: StackDraft, confidence: number): ProposedStack {
  const position = draft.positions[stack.index] ?? null;
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
    confidence,
    reason: placeReason(draft, stack),
    position,
    spot: tellingSpot(stack.reference ?? undefined),
  };
}

function placeReason(draft: SortedDraft, stack: StackDraft): string {
  const spot = draft.layout.spots[stack.index];
  if (draft.places[stack.index]?.row === null) {
    return stack.fixed?.byPerson ? "Left without a place by a person." : "Nothing tells where it belongs.";
  }
  if (spot?.basis === "fixed") {
    return stack.fixed?.byPerson === true ? "Placed by a person." : "Placed by an earlier sorting.";
  }
  if (draft.stacks.length === 1) return "The only stack.";
  const own = draft.graph.edges.filter((edge) => edge.a === stack.index || edge.b === stack.index);
  const agreeing = own.filter((edge) => agreesWithPlaces(edge, draft.graph, draft.places));
  if (agreeing.length === 0) {
    const doubt = spot?.isUnsure
      ? "The order shot leaves more than one place for it"
      : "The order shot leaves one place for it";
    return `${doubt}; it shows too little detail to be matched.`;
  }
  const best = [...agreeing].sort((a, b) => b.weight - a.weight).slice(0, 2);
  const names = best.map((edge) => nameOf(draft, edge.a === stack.index ? edge.b : edge.a));
  return `Its picture matches ${names.join(" and ")} at the shift expected there.`;
}

function writeFrames(draft: SortedDraft, kept: readonly StackDraft[], facts: SortFacts): ProposedFrame[] {
  const homes = new Map<string, { stack: StackDraft; entry: FrameDraft }>();
  for (const stack of kept) for (const entry of stack.frames) homes.set(entry.frame.id, { stack, entry });
  const chances = stackChances(draft, kept);
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
      confidence: chances.get(stack.index) ?? 0,
      reason: frameReason(draft, stack, entry),
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

/** A frame is right where its whole stack is: as sure as the least sure decision that made the stack. */
function stackChances(draft: SortedDraft, kept: readonly StackDraft[]): Map<number, number> {
  const homes = new Map<string, number>();
  for (const stack of kept) for (const { frame } of stack.frames) homes.set(frame.id, stack.index);
  const chances = new Map(kept.map((stack) => [stack.index, stack.fixed?.byPerson ? 1 : HIGHEST_CHANCE]));
  for (const join of draft.split.joins.values()) {
    const chance = joinChance(join, draft.split.limit);
    for (const home of [homes.get(join.before.id), homes.get(join.after.id)]) {
      const before = home === undefined ? undefined : chances.get(home);
      if (home !== undefined && before !== undefined && before < 1) chances.set(home, Math.min(before, chance));
    }
  }
  for (const { atFrameId } of draft.split.doubled) {
    const home = homes.get(atFrameId);
    if (home !== undefined && chances.get(home) !== 1) chances.set(home, DOUBLED_CHANCE);
  }
  return chances;
}

function frameReason(draft: SortedDraft, stack: StackDraft, entry: FrameDraft): string {
  if (stack.fixed?.byPerson) return "Put here by a person.";
  const join = draft.split.joins.get(entry.frame.id);
  if (!join) return "The first of its stack.";
  const { name } = join.before;
  const pause = join.pauseS === null ? "at an unknown time" : `${formatSeconds(join.pauseS)} later`;
  const isMatched = join.verdict === "same" || join.verdict === "different";
  const shift = isMatched
    ? `shifted by ${percent(shiftFraction(join.measure, join.before))}`
    : "with too little detail to compare";
  const px = Math.round(Math.hypot(join.measure.xPx, join.measure.yPx));
  return join.isSame
    ? `With ${name} before it: ${pause}, ${isMatched ? `${px} px of shift` : shift}.`
    : `Begins ${tileOf(draft, stack.index) ?? "a stack"} after ${name}: ${pause}, ${shift}.`;
}

function formatSeconds(seconds: number): string {
  if (seconds < 10) return `${seconds.toFixed(1)} s`;
  return seconds < 120 ? `${Math.round(seconds)} s` : `${Math.round(seconds / 60)} min`;
}
