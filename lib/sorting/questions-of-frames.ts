import type { FrameDraft, StackDraft } from "./draft";
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
  const host = draft.stacks[stack.index - 1] ?? draft.stacks[stack.index + 1];
  return [
    {
      key: `stray ${ids.join(" ")}`,
      kind: "stray",
      message: isOne
        ? `Does ${first} belong to the picture?`
        : `Do the ${ids.length} frames from ${first} on belong to the picture?`,
      evidence: `${isOne ? "It does" : "They do"} not overlap any tile the way neighbours do.`,
      frameIds: ids,
      stackIds: [],
      tile: null,
      answers: [
        { label: isOne ? "Leave it loose" : "Leave them loose", action: { type: "keep" } },
        ...(host && isKept(draft, host) ? [moveTo(draft, ids, host)] : []),
        { label: isOne ? "Make it a stack" : "Make them one stack", action: { type: "new-stack", frameIds: ids } },
      ],
      severity: SEVERITY.stray,
    },
  ];
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
