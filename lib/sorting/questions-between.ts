import type { StackDraft } from "./draft";
import { gatheredKey } from "./gathered-key";
import { joinChance } from "./join-chances";
import { shiftFraction } from "./judge-pair";
import { isKept, nameOf, tileOf, type SortedDraft } from "./sorted-draft";
import type { Join } from "./split-stacks";
import type { AnswerAction, ProposedQuestion } from "./types";

const SEVERITY = 60;
/** Below this a frame is asked about. Our own. */
const SURE_ENOUGH = 0.75;
const MOST_SINGLE_QUESTIONS = 3;
const CLOSELY = 0.8;
const FAIRLY = 0.5;
const WEAKLY = 0.35;

type Answers = ProposedQuestion["answers"];

/**
 * Frames at the border of two neighbouring stacks that may belong to the other one.
 * @param settled - keys of what was answered before: not gathered with the rest
 */
export function questionsBetween(draft: SortedDraft, settled: ReadonlySet<string>): ProposedQuestion[] {
  const homes = new Map<string, StackDraft>();
  for (const stack of draft.stacks) {
    if (isKept(draft, stack)) for (const { frame } of stack.frames) homes.set(frame.id, stack);
  }
  const doubts = [...draft.split.joins.values()].filter((join) => joinChance(join, draft.split.limit) < SURE_ENOUGH);
  const questions = doubts.flatMap((join) => {
    const [before, after] = [homes.get(join.before.id), homes.get(join.after.id)];
    if (!before || !after || before.fixed?.byPerson || after.fixed?.byPerson) return [];
    return [before === after ? askJoined(draft, join, after) : askCut(draft, join, before, after)];
  });
  return gather(questions.filter(({ key }) => !settled.has(key)));
}

function gather(questions: readonly ProposedQuestion[]): ProposedQuestion[] {
  const [first] = questions;
  if (!first || questions.length <= MOST_SINGLE_QUESTIONS) return [...questions];
  const frameIds = questions.flatMap((question) => question.frameIds);
  const tiles = [...new Set(questions.flatMap(({ tile }) => tile ?? []))];
  return [
    {
      ...first,
      key: gatheredKey(
        first.kind,
        questions.map(({ key }) => key),
      ),
      message: `Are the stacks cut at the right frames?`,
      evidence: `At ${questions.length} frames neither picture nor pause says clearly where one tile ends, in ${tiles.slice(0, 12).join(", ")}${tiles.length > 12 ? " and more" : ""}.`,
      frameIds,
      stackIds: [...new Set(questions.flatMap((question) => question.stackIds))],
      answers: [{ label: "Leave them as they are", action: { type: "keep" } }],
    },
  ];
}

/** The frame begins a stack and may be the last of the one before. */
function askCut(draft: SortedDraft, join: Join, before: StackDraft, after: StackDraft): ProposedQuestion {
  const { name, id } = join.after;
  const [from, to] = [nameOf(draft, after.index), nameOf(draft, before.index)];
  const isAlone = after.frames.length === 1;
  const move: AnswerAction = { type: "move-frames", frameIds: [id], toStackId: before.id };
  return question(draft, join, {
    message: `Does ${name} belong to ${from} or to ${to}?`,
    stacks: [after, before],
    answers: [
      { label: isAlone ? `Keep it as ${from}` : `Keep in ${from}`, action: { type: "keep" } },
      { label: `Move to ${to}`, action: move },
    ],
  });
}

/** The frame goes on a stack and may begin another one. */
function askJoined(draft: SortedDraft, join: Join, stack: StackDraft): ProposedQuestion {
  const { name, id } = join.after;
  const where = nameOf(draft, stack.index);
  const next = stack.frames.at(-1)?.frame.id === id ? followingStack(draft, stack) : null;
  const other: Answers[number] = next
    ? {
        label: `Move to ${nameOf(draft, next.index)}`,
        action: { type: "move-frames", frameIds: [id], toStackId: next.id },
      }
    : { label: `Split at ${name}`, action: { type: "split-stack", stackId: stack.id, atFrameId: id } };
  return question(draft, join, {
    message: next
      ? `Does ${name} belong to ${where} or to ${nameOf(draft, next.index)}?`
      : `Does ${name} still belong to ${where}?`,
    stacks: next ? [stack, next] : [stack],
    answers: [{ label: `Keep in ${where}`, action: { type: "keep" } }, other],
  });
}

function followingStack(draft: SortedDraft, stack: StackDraft): StackDraft | null {
  const list = draft.bodies.find((body) => body.includes(stack.index)) ?? [];
  const next = draft.stacks[list[list.indexOf(stack.index) + 1] ?? -1];
  return next && isKept(draft, next) ? next : null;
}

function question(
  draft: SortedDraft,
  join: Join,
  { message, stacks, answers }: { message: string; stacks: readonly StackDraft[]; answers: Answers },
): ProposedQuestion {
  return {
    key: `between-stacks ${join.after.id}`,
    kind: "between-stacks",
    message,
    evidence: evidenceOf(draft, join),
    frameIds: [join.after.id],
    stackIds: stacks.map(({ id }) => id),
    tile: tileOf(draft, stacks[0]?.index ?? 0),
    answers,
    severity: SEVERITY,
  };
}

function evidenceOf(draft: SortedDraft, join: Join): string {
  const after = [...draft.split.joins.values()].find((next) => next.before.id === join.after.id);
  const pauses = [
    join.pauseS === null ? "" : `${seconds(join.pauseS)} after ${join.before.name}`,
    after && after.pauseS !== null ? `${seconds(after.pauseS)} before ${after.after.name}` : "",
  ].filter((part) => part !== "");
  const time = pauses.length > 0 ? `Taken ${pauses.join(" and ")}` : "The times say nothing";
  return `${time}; its picture ${matchOf(join)}.`;
}

function matchOf({ measure, before }: Join): string {
  const px = Math.round(Math.hypot(measure.xPx, measure.yPx));
  const { name } = before;
  if (measure.contrast < 1) {
    // Nothing to register by: what is left to judge is how alike the two are as they lie (SSIM, Wang et al. 2004).
    return `shows too little detail to be matched with ${name}; as they lie, their similarity is ${measure.ssim.toFixed(2)} of 1`;
  }
  if (measure.ncc < WEAKLY) return `matches ${name} nowhere for sure`;
  const how = measure.ncc >= CLOSELY ? "closely" : measure.ncc >= FAIRLY ? "fairly" : "weakly";
  const far = Math.round(shiftFraction(measure, before) * 100);
  return `matches ${name} ${how}, shifted by ${px} px (${far} % of the long side)`;
}

function seconds(value: number): string {
  if (value < 10) return `${value.toFixed(1)} s`;
  return value < 120 ? `${Math.round(value)} s` : `${Math.round(value / 60)} min`;
}
