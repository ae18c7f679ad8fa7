import { emptyPlaces } from "@/lib/board/empty-tiles";
import { holeToken, type Hole, type HoleLine } from "@/lib/board/name-tokens";
import { framesInUse, type FrameDraft, type StackDraft } from "./draft";
import { gatheredKey } from "./gathered-key";
import { isKept, nameOf, percent, tileOf, type SortedDraft } from "./sorted-draft";
import type { ProposedQuestion } from "./types";

/** Severities, higher is worse: what can only be mended by shooting again comes first. */
const SEVERITY = {
  hole: 95,
  retake: 65,
  "two-stacks": 60,
  "soft-stack": 62,
  "thin-seam": 45,
  "few-frames": 35,
} as const;
/** More doubts of one kind than this are one question: the answer will be the same for all. Our own. */
const MOST_SINGLE_QUESTIONS = 3;
const MOST_NAMES = 12;
const MOST_ASIDE_NAMES = 4;
/** Stacks that say where a hole is: one of them may be moved, and the others still know. */
const MOST_WITNESSES = 3;

const ACCEPT = { type: "keep" } as const;

/**
 * Doubts about places, seams and numbers of frames.
 * @param settled - keys of what was answered before: not gathered with the rest
 */
export function questionsOfGrid(draft: SortedDraft, settled: ReadonlySet<string>): ProposedQuestion[] {
  const unsettled = ({ key }: ProposedQuestion) => !settled.has(key);
  const { overlapWanted, framesPerTile } = draft.options;
  return [
    ...gather(holeQuestions(draft).filter(unsettled), {
      message: (count) => `Are stacks missing at these ${count} places of the grid?`,
      keep: "Leave them empty",
      nameOne: ({ tile }) => tile ?? "",
    }),
    ...gather(thinQuestions(draft).filter(unsettled), {
      message: (count) => `Are the overlaps at ${count} seams enough?`,
      evidence: `Less than the ${percent(overlapWanted)} wanted`,
      keep: "Accept the small overlaps",
      nameOne: ({ stackIds }) => stackIds.map((id) => nameById(draft, id)).join("–"),
    }),
    ...gather(fewQuestions(draft).filter(unsettled), {
      message: (count) => `Are the few frames of ${count} stacks enough?`,
      evidence: `Fewer than ${framesPerTile.least} frames in use`,
      keep: "Merge them as they are",
      nameOne: ({ stackIds }) => stackIds.map((id) => nameById(draft, id)).join(""),
    }),
    ...retakeQuestions(draft),
    ...doubledQuestions(draft),
    ...softStackQuestions(draft),
  ];
}

interface Gathering {
  readonly message: (count: number) => string;
  /** What the single questions have in common. */
  readonly evidence?: string;
  /** Label of the answer that leaves all as it is. */
  readonly keep: string;
  readonly nameOne: (question: ProposedQuestion) => string;
}

/** Many doubts of one kind as one question: accepted all together, or mended one by one on the board. */
function gather(
  questions: readonly ProposedQuestion[],
  { message, evidence, keep, nameOne }: Gathering,
): ProposedQuestion[] {
  const [first] = questions;
  if (!first || questions.length <= MOST_SINGLE_QUESTIONS) return [...questions];
  const names = questions.map(nameOne);
  const list = `${names.slice(0, MOST_NAMES).join(", ")}${names.length > MOST_NAMES ? " and more" : ""}.`;
  return [
    {
      ...first,
      key: gatheredKey(
        first.kind,
        questions.map(({ key }) => key),
      ),
      message: message(questions.length),
      evidence: evidence ? `${evidence}: ${list}` : list,
      frameIds: questions.flatMap((question) => question.frameIds),
      stackIds: [...new Set(questions.flatMap((question) => question.stackIds))],
      answers: [{ label: keep, action: ACCEPT }],
    },
  ];
}

function nameById(draft: SortedDraft, id: string): string {
  const stack = draft.stacks.find((candidate) => candidate.id === id);
  return stack ? nameOf(draft, stack.index) : "";
}

function findHoles(draft: SortedDraft): Hole[] {
  const rows = draft.places.reduce((most, place) => Math.max(most, place.row ?? 0), 0);
  const columns = draft.places.reduce((most, place) => Math.max(most, place.column ?? 0), 0);
  return emptyPlaces({ rows, columns }, draft.places).map(({ row, column }) => ({
    row: holeLine(draft, "row", row, column),
    column: holeLine(draft, "column", column, row),
  }));
}

/**
 * The stacks of the hole's row or column that lie before it, nearest first, then those beyond it: lines that come in
 * between change nothing of that. In an empty line, those of the one before it.
 */
function holeLine(draft: SortedDraft, axis: "row" | "column", line: number, across: number): HoleLine {
  const other = axis === "row" ? "column" : "row";
  for (let at = line; at > 0; at--) {
    const held = draft.stacks.flatMap(({ id, index }) => {
      const place = draft.places[index];
      const side = place?.[other];
      return place?.[axis] === at && side ? [{ id, steps: side - across }] : [];
    });
    held.sort((a, b) => Number(a.steps > 0) - Number(b.steps > 0) || Math.abs(a.steps) - Math.abs(b.steps));
    if (held.length > 0) return { stackIds: held.slice(0, MOST_WITNESSES).map(({ id }) => id), further: line - at };
  }
  return { stackIds: [], further: line };
}

function holeQuestions(draft: SortedDraft): ProposedQuestion[] {
  return findHoles(draft).map((hole) => {
    const tile = holeToken(hole);
    return {
      key: `hole ${nearestOf(hole.row)} ${nearestOf(hole.column)}`,
      kind: "hole",
      message: `Is a stack missing at ${tile}?`,
      evidence: "No frame shows this part of the scene as a tile of its own.",
      frameIds: [],
      stackIds: [],
      tile,
      answers: [{ label: `Leave ${tile} empty`, action: ACCEPT }],
      severity: SEVERITY.hole,
    };
  });
}

/** By stacks, not by its name: settled, it stays so however many lines come in before it. */
function nearestOf({ stackIds, further }: HoleLine): string {
  return `${stackIds[0] ?? "edge"}+${further}`;
}

function thinQuestions(draft: SortedDraft): ProposedQuestion[] {
  const thin = draft.seams.filter((seam) => seam.overlap !== null && seam.overlap < draft.options.overlapWanted);
  return thin.map((seam) => {
    const [a, b] = [nameOf(draft, seam.a), nameOf(draft, seam.b)];
    const ids = [draft.stacks[seam.a]?.id ?? "", draft.stacks[seam.b]?.id ?? ""];
    return {
      key: `thin-seam ${ids.join(" ")}`,
      kind: "thin-seam",
      message: `Is the overlap between ${a} and ${b} enough?`,
      evidence: `It is ${(100 * (seam.overlap ?? 0)).toFixed(1)} % of the side; ${percent(draft.options.overlapWanted)} are wanted.`,
      frameIds: [],
      stackIds: ids,
      tile: tileOf(draft, seam.a),
      answers: [{ label: "Accept the small overlap", action: ACCEPT }],
      severity: SEVERITY["thin-seam"],
    } satisfies ProposedQuestion;
  });
}

function fewQuestions(draft: SortedDraft): ProposedQuestion[] {
  const { least } = draft.options.framesPerTile;
  const few = draft.stacks.filter((stack) => {
    if (!isKept(draft, stack) || !draft.takes[stack.index]?.isChosenTake) return false;
    return framesInUse(stack).length < least;
  });
  return few.map((stack) => ({
    key: `few-frames ${stack.id}`,
    kind: "few-frames",
    message: `${framesInUse(stack).length === 1 ? "Is" : "Are"} ${countOf(framesInUse(stack).length)} enough for ${nameOf(draft, stack.index)}?`,
    evidence: `${countOf(stack.frames.length)}, ${framesInUse(stack).length} in use; ${least} or more are wanted.${asideText(stack)}`,
    frameIds: [],
    stackIds: [stack.id],
    tile: tileOf(draft, stack.index),
    answers: [{ label: "Merge it as it is", action: ACCEPT }, ...bringBack(stack)],
    severity: SEVERITY["few-frames"],
  }));
}

/** More frames to be had are those set aside. */
function bringBack(stack: StackDraft): ProposedQuestion["answers"] {
  const aside = framesAside(stack);
  const [first] = aside;
  if (!first) return [];
  const label = `Bring back ${aside.length === 1 ? first.frame.name : countOf(aside.length)}`;
  return [{ label, action: { type: "bring-back", frameIds: aside.map(({ frame }) => frame.id) } }];
}

/** What would be brought back, so that its worth is known: " Set aside: HARB0013 (soft, sharpness 6 %)." */
function asideText(stack: StackDraft): string {
  const aside = framesAside(stack);
  if (aside.length === 0) return "";
  const named = aside.slice(0, MOST_ASIDE_NAMES).map(({ frame, setAside, sharpness }) => {
    const score = sharpness.relative === null ? "" : `, sharpness ${percent(sharpness.relative)}`;
    return `${frame.name} (${setAside}${score})`;
  });
  return ` Set aside: ${named.join(", ")}${aside.length > named.length ? " and more" : ""}.`;
}

function framesAside({ frames }: StackDraft): FrameDraft[] {
  return frames.filter(({ setAside }) => setAside !== null);
}

function countOf(frames: number): string {
  return frames === 1 ? "1 frame" : `${frames} frames`;
}

function retakeQuestions(draft: SortedDraft): ProposedQuestion[] {
  return draft.takeDoubts.map(({ chosen, other, evidence }) => {
    const [a, b] = [draft.stacks[chosen], draft.stacks[other]];
    const tile = tileOf(draft, chosen);
    const choose = (stack: StackDraft | undefined) =>
      ({
        label: `Merge take ${draft.takes[stack?.index ?? 0]?.take ?? 1}`,
        action: { type: "choose-take", stackId: stack?.id ?? "" },
      }) as const;
    return {
      key: `retake ${a?.id ?? ""} ${b?.id ?? ""}`,
      kind: "retake",
      message: `Which take of ${tile ?? "this tile"} is to be merged?`,
      evidence: `${evidence}.`,
      frameIds: [],
      stackIds: [a?.id ?? "", b?.id ?? ""],
      tile,
      answers: [choose(a), choose(b)],
      severity: SEVERITY.retake,
    };
  });
}

function doubledQuestions(draft: SortedDraft): ProposedQuestion[] {
  return draft.split.doubled.flatMap(({ atFrameId, pauseS }) => {
    const stack = draft.stacks.find((candidate) => candidate.frames.some(({ frame }) => frame.id === atFrameId));
    if (!stack || !isKept(draft, stack) || stack.fixed?.byPerson) return [];
    const where = nameOf(draft, stack.index);
    const first = stack.frames.find(({ frame }) => frame.id === atFrameId)?.frame.name ?? "";
    return [
      {
        key: `two-stacks ${atFrameId}`,
        kind: "two-stacks",
        message: `Are the ${stack.frames.length} frames of ${where} one stack?`,
        evidence: `${where} has twice the usual frames, with a pause of ${Math.round(pauseS)} s before ${first}.`,
        frameIds: [atFrameId],
        stackIds: [stack.id],
        tile: tileOf(draft, stack.index),
        answers: [
          { label: "Keep them as one stack", action: ACCEPT },
          { label: `Split at ${first}`, action: { type: "split-stack", stackId: stack.id, atFrameId } },
        ],
        severity: SEVERITY["two-stacks"],
      } satisfies ProposedQuestion,
    ];
  });
}

function softStackQuestions(draft: SortedDraft): ProposedQuestion[] {
  return draft.softStacks.flatMap(({ index, score, witnesses, neighbours }) => {
    const stack = draft.stacks[index];
    if (!stack || !isKept(draft, stack) || !draft.takes[index]?.isChosenTake || stack.fixed?.byPerson) return [];
    const less = percent(1 - Math.exp(score));
    return [
      {
        key: `soft-stack ${stack.id}`,
        kind: "soft-stack",
        message: `Are all frames of ${nameOf(draft, index)} soft?`,
        evidence: `Where they overlap it has ${less} less fine detail than ${witnesses} of ${neighbours} neighbours.`,
        frameIds: [],
        stackIds: [stack.id],
        tile: tileOf(draft, index),
        answers: [
          { label: "Merge it as it is", action: ACCEPT },
          {
            label: "Set all aside",
            action: { type: "set-aside", frameIds: framesInUse(stack).map(({ frame }) => frame.id), reason: "soft" },
          },
        ],
        severity: SEVERITY["soft-stack"],
      } satisfies ProposedQuestion,
    ];
  });
}
