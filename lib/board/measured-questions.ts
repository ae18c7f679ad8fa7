import { currentSeams } from "@/lib/board/current-seams";
import type { Board, BoardFrame, BoardQuestion, BoardSeam, BoardStack } from "@/lib/board/model";
import { stackToken, tileToken } from "@/lib/board/name-tokens";
import { countOf, groupDigits } from "@/lib/board/words";
import type { Shift } from "@/lib/sorting/draft";
import type { AnswerAction, ProposedQuestion } from "@/lib/sorting/types";

/*
 * Questions that measuring asks after what people did: frames that show something else than their stack, and stacks
 * that do not fit where they were put. Their keys say what they are about, so that what was answered is not asked again.
 */
const ELSEWHERE = "elsewhere";
const MISFIT = "misfit";

/** What averages another scene in comes first of all; then what does not join. Above the sorting's own. */
const SEVERITY = { elsewhere: 95, misfit: 90 } as const;
/** More would be one mistake asked about many times: a row that was pushed on. */
const MOST_SINGLE_QUESTIONS = 3;
const MOST_NAMED = 4;

/** A frame that shows another part of the scene than the rest of its stack. */
export interface ElsewhereFrame {
  readonly frame: BoardFrame;
  /** From the others, full-size px; null: its picture matches theirs nowhere. */
  readonly shift: Shift | null;
  /** The stack whose reference it matches, and how far it lies from that, px; null: none that was looked at. */
  readonly host: { readonly stackId: string; readonly distancePx: number } | null;
}

export function isMeasuredQuestion({ key }: Pick<BoardQuestion, "key">): boolean {
  return key.startsWith(`${ELSEWHERE} `) || key.startsWith(`${MISFIT} `);
}

/**
 * Asks about the frames of one stack: one question for those that belong to the same place.
 * @param settledKeys - of questions that were answered: what they name is accepted
 */
export function askElsewhere(
  stack: BoardStack,
  frames: readonly ElsewhereFrame[],
  settledKeys: readonly string[],
): ProposedQuestion[] {
  const accepted = new Set(settledKeys.flatMap((key) => framesOfKey(key, stack.id)));
  const asked = frames.filter(({ frame }) => frame.setAside === null && !accepted.has(frame.id));
  const hostIds = new Set(asked.map(({ host }) => host?.stackId ?? null));
  return [...hostIds].map((hostId) => {
    const group = asked.filter(({ host }) => (host?.stackId ?? null) === hostId);
    return elsewhereQuestion(stack, hostId, group);
  });
}

function elsewhereQuestion(
  stack: BoardStack,
  hostId: string | null,
  group: readonly ElsewhereFrame[],
): ProposedQuestion {
  const frameIds = group.map(({ frame }) => frame.id).sort();
  const isOne = group.length === 1;
  const first = group[0]?.frame.name ?? "";
  const [it, where] = [isOne ? "it" : "them", stackToken(stack.id)];
  const who = isOne ? `${first} shows` : `${countOf(group.length, "frame")} from ${first} on show`;
  const apart: AnswerAction = { type: "new-stack", frameIds };
  return {
    key: `${ELSEWHERE} ${stack.id} ${frameIds.join(" ")}`,
    kind: "stray",
    message: `${who} another part of the scene than the rest of ${where}`,
    evidence: evidenceOf(group),
    frameIds,
    stackIds: [stack.id],
    tile: tileToken(stack.id),
    answers: [
      ...(hostId === null
        ? []
        : [
            {
              label: `Move ${it} to ${stackToken(hostId)}`,
              action: { type: "move-frames", frameIds, toStackId: hostId } as const,
            },
          ]),
      ...(hostId === null && !isOne ? [{ label: "Make them one stack", action: apart }] : []),
      { label: `Set ${it} aside`, action: { type: "set-aside", frameIds, reason: "stray" } },
      { label: `Keep ${it} in ${where}`, action: { type: "keep" } },
    ],
    severity: SEVERITY.elsewhere,
  };
}

function evidenceOf(group: readonly ElsewhereFrame[]): string {
  const [first] = group;
  const distances = group.flatMap(({ shift }) => (shift ? [Math.hypot(shift.xPx, shift.yPx)] : []));
  const [their, they] = group.length === 1 ? ["Its picture", "it"] : ["Their pictures", "they"];
  const isOne = group.length === 1;
  const own =
    distances.length === 0
      ? `${their} ${isOne ? "matches" : "match"} the others nowhere`
      : `${their} ${isOne ? "lies" : "lie"} ${span(distances)} from the others`;
  if (!first?.host) return `${own}.`;
  const near = span(group.flatMap(({ host }) => host?.distancePx ?? []));
  return `${own}; ${they} ${isOne ? "matches" : "match"} ${stackToken(first.host.stackId)}, ${near} from its reference.`;
}

/** "965 px", "961 to 965 px". */
function span(valuesPx: readonly number[]): string {
  const [least, most] = [Math.min(...valuesPx), Math.max(...valuesPx)].map((value) => groupDigits(value));
  return least === most ? `${least} px` : `${least} to ${most} px`;
}

/**
 * Asks about stacks that people put where the pictures of their neighbours do not go on. Every such seam is asked about
 * once, at the stack with most of them; many at once are one question.
 * @param misfits - current seams whose pictures are telling and do not match
 */
export function askMisfits(
  board: Pick<Board, "stacks">,
  misfits: readonly BoardSeam[],
  settledKeys: readonly string[],
): ProposedQuestion[] {
  const accepted = new Set(settledKeys.flatMap(seamsOfKey));
  const movedIds = board.stacks.filter(({ placedBy }) => placedBy === "person").map(({ id }) => id);
  let open = misfits.filter((seam) => !accepted.has(misfitKey(seam)));
  const found: { stackId: string; seams: readonly BoardSeam[] }[] = [];
  for (;;) {
    const [worst] = movedIds
      .map((stackId) => ({ stackId, seams: open.filter((seam) => isOf(seam, stackId)) }))
      .sort((a, b) => b.seams.length - a.seams.length || (a.stackId < b.stackId ? -1 : 1));
    if (!worst || worst.seams.length === 0) break;
    found.push(worst);
    open = open.filter((seam) => !isOf(seam, worst.stackId));
  }
  if (found.length <= MOST_SINGLE_QUESTIONS) return found.map(({ stackId, seams }) => misfitQuestion([stackId], seams));
  return [
    misfitQuestion(
      found.map(({ stackId }) => stackId),
      found.flatMap(({ seams }) => seams),
    ),
  ];
}

function misfitQuestion(movedIds: readonly string[], seams: readonly BoardSeam[]): ProposedQuestion {
  const [first = ""] = movedIds;
  const isOne = movedIds.length === 1;
  const beside = [...new Set(seams.flatMap(({ stackId, neighbourId }) => [stackId, neighbourId]))].filter(
    (id) => !movedIds.includes(id),
  );
  return {
    key: `${MISFIT} ${seams.map(misfitKey).sort().join(" ")}`,
    kind: "thin-seam",
    message: isOne
      ? `${tileToken(first)} does not fit beside ${listed(beside)}`
      : `${listed(movedIds)} do not fit beside their neighbours`,
    evidence: isOne
      ? "The pictures do not match where these tiles would overlap."
      : `At ${countOf(seams.length, "seam")} the pictures do not match where the tiles would overlap.`,
    frameIds: [],
    stackIds: [...movedIds, ...beside],
    tile: tileToken(first),
    answers: [
      {
        label: isOne ? `Take ${tileToken(first)} out of the grid` : "Take them out of the grid",
        action: { type: "take-out", stackIds: movedIds },
      },
      { label: isOne ? "Leave it there" : "Leave them there", action: { type: "keep" } },
    ],
    severity: SEVERITY.misfit,
  };
}

/** "A1", "A1 and B2", "A1, B2, C3 and 4 more". */
function listed(stackIds: readonly string[]): string {
  const names = stackIds.map(tileToken);
  const rest = names.length - MOST_NAMED;
  const shown = rest > 1 ? [...names.slice(0, MOST_NAMED), `${rest} more`] : names;
  return shown.length < 2 ? shown.join("") : `${shown.slice(0, -1).join(", ")} and ${shown.at(-1) ?? ""}`;
}

/** Whether what a question of these is about is still so on the board. */
export function causeStands(board: Board, { key }: Pick<BoardQuestion, "key">): boolean {
  const [kind, ...about] = key.split(" ");
  if (kind === ELSEWHERE) {
    const [stackId, ...frameIds] = about;
    const asked = new Set(frameIds);
    const inUse = board.frames.filter((frame) => frame.stackId === stackId && frame.setAside === null);
    return inUse.filter(({ id }) => asked.has(id)).length === asked.size && inUse.length > asked.size;
  }
  const unmatched = new Set(currentSeams(board).filter(isUnmatched).map(misfitKey));
  return about.every((seam) => unmatched.has(seam));
}

/** No overlap was found, or none that is left. */
export function isUnmatched({ overlap }: BoardSeam): boolean {
  return overlap === null || overlap <= 0;
}

/** Pairs of stacks that open questions say do not fit. */
export function askedSeams(questions: readonly Pick<BoardQuestion, "key">[]): ReadonlySet<string> {
  return new Set(questions.flatMap(({ key }) => seamsOfKey(key)));
}

export function misfitKey({ stackId, neighbourId, side }: BoardSeam): string {
  return `${stackId}/${neighbourId}/${side}`;
}

/** The stack whose frames a question is about; null: it is about seams. */
export function elsewhereStack({ key }: Pick<BoardQuestion, "key">): string | null {
  const [kind, stackId = null] = key.split(" ");
  return kind === ELSEWHERE ? stackId : null;
}

function framesOfKey(key: string, stackId: string): string[] {
  const [kind, of, ...frameIds] = key.split(" ");
  return kind === ELSEWHERE && of === stackId ? frameIds : [];
}

function seamsOfKey(key: string): string[] {
  const [kind, ...seams] = key.split(" ");
  return kind === MISFIT ? seams : [];
}

function isOf({ stackId, neighbourId }: BoardSeam, id: string): boolean {
  return stackId === id || neighbourId === id;
}
