import { framesInUse, type StackDraft } from "./draft";
import type { Place } from "./number-places";
import { median } from "./robust";

export interface Take {
  readonly take: number;
  readonly isChosenTake: boolean;
}

/** Two takes of one tile between which the figures do not clearly choose. */
export interface TakeDoubt {
  readonly chosen: number;
  readonly other: number;
  readonly evidence: string;
}

/** Log ratio of sharpness that outweighs the number of frames. Our own, after the limits for single frames. */
const SHARPER = 0.15;
/** Advantage in log noise or log sharpness under which neither take is clearly better. Our own. */
const CLEAR_ADVANTAGE = 0.1;

/**
 * Numbers the takes of each tile by the order shot and proposes the better one: sharper, then more frames in use, then
 * the later one.
 */
export function chooseTakes(
  stacks: readonly StackDraft[],
  places: readonly Place[],
): { takes: readonly Take[]; doubts: readonly TakeDoubt[] } {
  const takes: Take[] = stacks.map(() => ({ take: 1, isChosenTake: true }));
  const doubts: TakeDoubt[] = [];
  const tiles = new Map<string, StackDraft[]>();
  for (const stack of stacks) {
    const { row, column } = places[stack.index] ?? {};
    if (row && column) tiles.set(`${row} ${column}`, [...(tiles.get(`${row} ${column}`) ?? []), stack]);
  }
  for (const members of tiles.values()) {
    const numbers = numberTakes(members);
    const fixed = members.find((stack) => stack.fixed?.isChosenTake);
    const best = fixed ?? bestOf(members);
    members.forEach((stack, at) => {
      takes[stack.index] = { take: numbers[at] ?? 1, isChosenTake: stack === best };
    });
    const rival = bestOf(members.filter((stack) => stack !== best));
    if (!best || !rival || rival.fixed) continue;
    const advantage = compare(best, rival);
    if (!fixed && Math.abs(advantage) >= CLEAR_ADVANTAGE) continue;
    const counts = `${framesInUse(best).length} and ${framesInUse(rival).length} frames in use`;
    doubts.push({ chosen: best.index, other: rival.index, evidence: `${counts}, equally sharp within 10 %` });
  }
  return { takes, doubts };
}

/** Takes numbered before keep their numbers; new ones get the free numbers in the order shot. */
function numberTakes(members: readonly StackDraft[]): number[] {
  const used = new Set(members.flatMap((stack) => (stack.fixed?.row ? [stack.fixed.take] : [])));
  let next = 1;
  return members.map((stack) => {
    if (stack.fixed?.row) return stack.fixed.take;
    while (used.has(next)) next++;
    used.add(next);
    return next;
  });
}

/** @param members - in the order shot */
function bestOf(members: readonly StackDraft[]): StackDraft | undefined {
  let best = members[0];
  for (const stack of members.slice(1)) if (best && compare(stack, best) >= 0) best = stack;
  return best;
}

/** Above 0 where a is the better take. */
function compare(a: StackDraft, b: StackDraft): number {
  const sharper = sharpnessRatio(a, b);
  if (Math.abs(sharper) > SHARPER) return sharper;
  return Math.log(Math.max(0.5, framesInUse(a).length) / Math.max(0.5, framesInUse(b).length)) / 2;
}

/** Log ratio of the two references' patches; both show the same view. */
function sharpnessRatio(a: StackDraft, b: StackDraft): number {
  const first = a.hub.measurements.patches;
  const second = b.hub.measurements.patches;
  const ratios = (size: "full" | "half") =>
    first[size].flatMap((value, patch) => {
      const other = second[size][patch] ?? 0;
      return value > 0 && other > 0 ? [Math.log(value / other)] : [];
    });
  const [full, half] = [median(ratios("full")), median(ratios("half"))];
  if (!Number.isFinite(full) || !Number.isFinite(half)) return 0;
  return Math.abs(full) < Math.abs(half) ? full : half;
}
