import { pauseText } from "@/lib/board/words";
import type { FrameDraft, StackDraft } from "./draft";
import { pauseSeconds } from "./pauses";
import { isKept, nameOf, percent, tileOf, type SortedDraft } from "./sorted-draft";
import type { ProposedQuestion, SetAsideReason } from "./types";

/** Severities, higher is worse: what would spoil the merged picture comes before what only weakens it. */
const SEVERITY = { stray: 70, moved: 55, exposure: 50, soft: 40, between: 60 } as const;

/** Doubts about single frames. */
export function questionsOfFrames(draft: SortedDraft): ProposedQuestion[] {
  const kept = draft.stacks.filter((stack) => isKept(draft, stack));
  return [
    ...kept.flatMap((stack) => stack.frames.flatMap((entry) => questionOfFrame(draft, stack, entry) ?? [])),
    ...draft.stacks.filter((stack) => !isKept(draft, stack)).flatMap((stack) => questionOfStray(draft, stack)),
    ...draft.order.filter((frame) => isLooseOdd(draft, frame.id)).flatMap((frame) => questionOfOdd(draft, frame.id)),
  ];
}

function questionOfFrame(draft: SortedDraft, stack: StackDraft, entry: FrameDraft): ProposedQuestion | null {
  if (entry.isSettled || stack.fixed?.byPerson) return null;
  const { name } = entry.frame;
  const where = nameOf(draft, stack.index);
  const common = { frameIds: [entry.frame.id], stackIds: [stack.id], tile: tileOf(draft, stack.index) };
  const answers = (reason: SetAsideReason, isAside: boolean): ProposedQuestion["answers"] => {
    const aside = {
      label: `Set ${name} aside`,
      action: { type: "set-aside", frameIds: [entry.frame.id], reason },
    } as const;
    const use = { label: `Keep ${name} in use`, action: { type: "keep" } } as const;
    return isAside ? [aside, use] : [use, aside];
  };
  const { deviation, sharpness } = entry;
  if (entry.setAside === null && deviation) {
    const kind = deviation.kind;
    return {
      ...common,
      key: `${kind} ${entry.frame.id}`,
      kind,
      message: `May ${name} be merged into ${where}?`,
      evidence: `It was ${deviation.evidence}.`,
      answers: answers(kind === "exposure" ? "exposure" : "moved", true),
      severity: kind === "exposure" ? SEVERITY.exposure : SEVERITY.moved,
    };
  }
  if (entry.setAside !== null || sharpness.verdict !== "ask") return null;
  return {
    ...common,
    key: `soft ${entry.frame.id}`,
    kind: "soft",
    message: `Is ${name} sharp enough for ${where}?`,
    evidence: `It has ${percent(1 - Math.exp(sharpness.score))} less fine detail than the others of its stack.`,
    answers: answers("soft", false),
    severity: SEVERITY.soft,
  };
}

function questionOfStray(draft: SortedDraft, stack: StackDraft): ProposedQuestion[] {
  if (draft.layout.spots[stack.index]?.isCertainStray) return [];
  const ids = stack.frames.map(({ frame }) => frame.id);
  const first = stack.frames[0]?.frame.name ?? "";
  const isOne = ids.length === 1;
  const host = nearestInTime(draft, ids);
  return [
    {
      key: `stray ${ids.join(" ")}`,
      kind: "stray",
      message: isOne
        ? `Does ${first} belong to the picture?`
        : `Do the ${ids.length} frames from ${first} on belong to the picture?`,
      evidence: `${isOne ? "It does" : "They do"} not overlap any tile the way neighbours do.${host ? ` ${host.evidence}` : ""}`,
      frameIds: ids,
      stackIds: [],
      tile: null,
      answers: [
        { label: isOne ? "Leave it loose" : "Leave them loose", action: { type: "keep" } },
        ...(host ? [moveTo(draft, ids, host.stack)] : []),
        { label: isOne ? "Make it a stack" : "Make them one stack", action: { type: "new-stack", frameIds: ids } },
      ],
      severity: SEVERITY.stray,
    },
  ];
}

/**
 * The stack whose frames were taken next to these, and how long before or after: why it is offered. Null where the
 * times do not tell, or nothing of the picture was taken beside them.
 */
function nearestInTime(draft: SortedDraft, ids: readonly string[]): { stack: StackDraft; evidence: string } | null {
  const at = draft.order.findIndex(({ id }) => id === ids[0]);
  const end = draft.order.findIndex(({ id }) => id === ids.at(-1));
  const beside = (from: number, to: number, tell: (pause: string, where: string) => string) => {
    const [before, after] = [draft.order[from], draft.order[to]];
    const other = from < at ? before : after;
    const stack = draft.stacks.find((each) => each.frames.some(({ frame }) => frame.id === other?.id));
    const seconds = before && after ? pauseSeconds(before, after) : null;
    if (!stack || !isKept(draft, stack) || seconds === null) return [];
    return [{ stack, seconds, evidence: tell(pauseText(seconds), nameOf(draft, stack.index)) }];
  };
  const subject = ids.length === 1 ? "It was" : "They were";
  const found = [
    ...beside(at - 1, at, (pause, where) => `${subject} taken ${pause} after ${where}.`),
    ...beside(end, end + 1, (pause, where) => `${subject} taken ${pause} before ${where}.`),
  ];
  return found.sort((a, b) => a.seconds - b.seconds)[0] ?? null;
}

function moveTo(
  draft: SortedDraft,
  frameIds: readonly string[],
  host: StackDraft,
): ProposedQuestion["answers"][number] {
  return {
    label: `Move to ${nameOf(draft, host.index)}`,
    action: { type: "move-frames", frameIds, toStackId: host.id },
  };
}

/** Odd frames that no stack took in. */
function isLooseOdd(draft: SortedDraft, id: string): boolean {
  return draft.split.odd.has(id) && !draft.split.joins.has(id);
}

function questionOfOdd(draft: SortedDraft, id: string): ProposedQuestion[] {
  const at = draft.order.findIndex((frame) => frame.id === id);
  const frame = draft.order[at];
  const before = draft.order[at - 1];
  const host = draft.stacks.find((stack) => stack.frames.some((entry) => entry.frame.id === before?.id));
  if (!frame || !host) return [];
  const { name } = frame;
  const where = nameOf(draft, host.index);
  return [
    {
      key: `stray ${id}`,
      kind: "stray",
      message: `Does ${name} belong to ${where}?`,
      evidence: `It was taken between two frames of ${where} and looks like neither.`,
      frameIds: [id],
      stackIds: [host.id],
      tile: tileOf(draft, host.index),
      answers: [{ label: "Leave it loose", action: { type: "keep" } }, moveTo(draft, [id], host)],
      severity: SEVERITY.stray,
    },
  ];
}
