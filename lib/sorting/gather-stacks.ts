import type { FixedStack, SortFacts, SortFrame } from "./types";

/** Which frames make a stack, before they are judged. */
export interface StackSeed {
  readonly id: string;
  readonly fixed: FixedStack | null;
  /** In the order taken. */
  readonly frames: readonly SortFrame[];
}

/** What is decided already about two frames that follow each other; null: nothing. */
export function joinFacts(facts: SortFacts): (before: SortFrame, after: SortFrame) => boolean | null {
  const stackOf = fixedStackOf(facts);
  return (before, after) => {
    const [a, b] = [stackOf.get(before.id), stackOf.get(after.id)];
    if (a && b) return a === b;
    // What a person settled is complete: frames that come later do not slip in.
    return a?.byPerson || b?.byPerson ? false : null;
  };
}

function fixedStackOf(facts: SortFacts): Map<string, FixedStack> {
  return new Map(facts.stacks.flatMap((stack) => stack.frameIds.map((id) => [id, stack] as const)));
}

/**
 * Stacks from the runs of the splitting and from the facts: a fixed stack takes in the new frames of its run, and its
 * frames stay together even where they do not follow each other.
 * @param order - all frames in the order taken
 * @returns stacks in the order of their first frame; ids of new ones derive from that frame's
 */
export function gatherStacks(
  runs: readonly (readonly SortFrame[])[],
  facts: SortFacts,
  order: readonly SortFrame[],
): StackSeed[] {
  const stackOf = fixedStackOf(facts);
  const members = new Map<string, { fixed: FixedStack | null; frames: SortFrame[] }>();
  const usedIds = new Set(facts.stacks.map((stack) => stack.id));
  for (const run of runs.flatMap((each) => cutAtFacts(each, stackOf))) {
    const fixed = run.flatMap((frame) => stackOf.get(frame.id) ?? [])[0] ?? null;
    const id = fixed?.id ?? freeId(run[0]?.id ?? "", usedIds);
    usedIds.add(id);
    const known = members.get(id);
    if (known) known.frames.push(...run);
    else members.set(id, { fixed, frames: [...run] });
  }
  // What a person put into a stack is in no run.
  const inRuns = new Set(runs.flatMap((run) => run.map(({ id }) => id)));
  for (const frame of order) {
    const fixed = stackOf.get(frame.id);
    if (!fixed || inRuns.has(frame.id)) continue;
    const known = members.get(fixed.id);
    if (known) known.frames.push(frame);
    else members.set(fixed.id, { fixed, frames: [frame] });
  }
  const place = new Map(order.map((frame, at) => [frame.id, at]));
  const at = (frame: SortFrame | undefined) => place.get(frame?.id ?? "") ?? 0;
  return [...members.entries()]
    .map(([id, { fixed, frames }]) => ({ id, fixed, frames: [...frames].sort((a, b) => at(a) - at(b)) }))
    .sort((a, b) => at(a.frames[0]) - at(b.frames[0]));
}

/** A new frame may join two fixed stacks into one run; it then goes with the earlier one, and they stay two. */
function cutAtFacts(run: readonly SortFrame[], stackOf: ReadonlyMap<string, FixedStack>): SortFrame[][] {
  const parts: { fixed: FixedStack | null; frames: SortFrame[] }[] = [];
  for (const frame of run) {
    const fixed = stackOf.get(frame.id) ?? null;
    const last = parts.at(-1);
    if (last && (!fixed || !last.fixed || last.fixed === fixed)) {
      last.frames.push(frame);
      last.fixed ??= fixed;
    } else parts.push({ fixed, frames: [frame] });
  }
  return parts.map(({ frames }) => frames);
}

function freeId(frameId: string, used: ReadonlySet<string>): string {
  let id = `stack-${frameId}`;
  for (let count = 2; used.has(id); count++) id = `stack-${frameId}-${count}`;
  return id;
}
