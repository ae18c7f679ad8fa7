import { framesOf } from "@/lib/board/look-up";
import type { ElsewhereFrame } from "@/lib/board/measured-questions";
import type { Board, BoardStack } from "@/lib/board/model";
import type { Shift, StackDraft } from "@/lib/sorting/draft";
import type { FrameSharpness } from "@/lib/sorting/frame-sharpness";
import { isFarApart, judgePair } from "@/lib/sorting/judge-pair";
import type { PairStore } from "@/lib/sorting/pair-store";
import type { SortFrame } from "@/lib/sorting/types";

/** Of one stack, frames whose stack of origin is looked for: each costs a few pairs. */
const MOST_LOOKED_FOR = 6;

/**
 * Frames of a stack that show another part of the scene than the rest. Against the reference: a clear match further off
 * than frames of one tile lie, or, where a person put the frame there, no match although both pictures are telling.
 * Where that is most of the stack, the reference and its like are the odd ones.
 * @param shifts - against the hub, as far as they are known, in the order of the frames
 * @returns ids of the frames
 */
export async function findElsewhere(
  { frames: entries, hub }: Pick<StackDraft, "frames" | "hub">,
  shifts: readonly (Shift | null)[],
  store: PairStore,
  isByPerson: (frameId: string) => boolean,
): Promise<ReadonlySet<string>> {
  const frames = entries.map(({ frame }) => frame);
  const doubtful = frames.filter((frame, at) => {
    const shift = shifts[at] ?? null;
    return frame !== hub && (shift === null || isFarApart(shift, hub));
  });
  await store.measureAll(doubtful.map((frame) => [hub.id, frame.id] as const));
  const odd = doubtful.filter((frame) => {
    const measure = store.find(hub.id, frame.id);
    const verdict = measure && judgePair(hub, frame, measure);
    return verdict === "different" || (verdict === "probably different" && isByPerson(frame.id));
  });
  const isMost = odd.length * 2 > frames.length;
  return new Set((isMost ? frames.filter((frame) => !odd.includes(frame)) : odd).map(({ id }) => id));
}

/** As for one stack, but what shows another part of the scene sets no scale: it is measured against the others' best. */
export function sharpnessApart(
  frames: readonly SortFrame[],
  elsewhere: ReadonlySet<string>,
  judge: (frames: readonly SortFrame[]) => FrameSharpness[],
): FrameSharpness[] {
  const rest = frames.filter(({ id }) => !elsewhere.has(id));
  const judged = new Map(judge(rest).map((sharpness, at) => [rest[at]?.id, sharpness]));
  return frames.map((frame) => judged.get(frame.id) ?? judgeLast(judge([...rest, frame])));
}

function judgeLast(judged: readonly FrameSharpness[]): FrameSharpness {
  const own = judged.at(-1);
  if (!own) return { score: 0, detail: 0, verdict: "cannot tell", relative: null };
  const best = Math.max(...judged.slice(0, -1).map(({ score }) => score));
  if (own.relative === null || !Number.isFinite(best)) return { ...own, relative: null };
  return { ...own, relative: Math.exp(Math.min(0, own.score - best)) };
}

/** Where frames that show something else come from, as far as the stacks around and those shot before and after tell. */
export async function findHosts(
  board: Board,
  stack: BoardStack,
  elsewhere: ReadonlySet<string>,
  { drafts, store }: { readonly drafts: ReadonlyMap<string, StackDraft>; readonly store: PairStore },
): Promise<ElsewhereFrame[]> {
  const draft = drafts.get(stack.id);
  if (!draft) return [];
  const rest = draft.frames.find(({ frame }) => !elsewhere.has(frame.id));
  const origin = elsewhere.has(draft.hub.id) ? (rest?.shift ?? null) : { xPx: 0, yPx: 0 };
  const found: ElsewhereFrame[] = [];
  for (const frame of framesOf(board, stack.id).filter(({ id }) => elsewhere.has(id))) {
    const entry = draft.frames.find((each) => each.frame.id === frame.id);
    if (!entry) continue;
    const { shift: own } = entry;
    const shift = own && origin ? { xPx: own.xPx - origin.xPx, yPx: own.yPx - origin.yPx } : null;
    const ids = found.length < MOST_LOOKED_FOR ? likelyHosts(board, stack, frame.orderTaken) : [];
    found.push({ frame, shift, host: await findHost(entry.frame, ids, drafts, store) });
  }
  return found;
}

async function findHost(
  frame: SortFrame,
  stackIds: readonly string[],
  drafts: ReadonlyMap<string, StackDraft>,
  store: PairStore,
): Promise<ElsewhereFrame["host"]> {
  for (const stackId of stackIds) {
    const hub = drafts.get(stackId)?.hub;
    if (!hub) continue;
    const measure = await store.measure(hub.id, frame.id);
    if (judgePair(hub, frame, measure) === "same") {
      return { stackId, distancePx: Math.hypot(measure.xPx, measure.yPx) };
    }
  }
  return null;
}

/** Of the frames shot just before and after, then of the places around. */
function likelyHosts(board: Board, { id, row, column }: BoardStack, orderTaken: number): string[] {
  const others = board.frames.filter(({ stackId }) => stackId !== null && stackId !== id);
  const distance = (frame: { readonly orderTaken: number }) => Math.abs(frame.orderTaken - orderTaken);
  const shotBeside = others
    .filter((frame) => distance(frame) <= board.grid.framesPerTile.most)
    .sort((a, b) => distance(a) - distance(b))
    .flatMap(({ stackId }) => stackId ?? []);
  const around = board.stacks.filter((stack) => {
    if (row === null || column === null || stack.row === null || stack.column === null) return false;
    return stack.id !== id && Math.abs(stack.row - row) <= 1 && Math.abs(stack.column - column) <= 1;
  });
  return [...new Set([...shotBeside, ...around.map((stack) => stack.id)])];
}
