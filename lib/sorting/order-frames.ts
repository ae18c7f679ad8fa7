import { groupByBody } from "./body-groups";
import { fileNumber, folderNumber, unwrapCounter, type FileNumber } from "./file-number";
import type { SortFrame } from "./types";

/** Frames of one camera in the order taken. */
export interface BodySequence {
  readonly frames: readonly SortFrame[];
  /** False where neither counter nor clock orders them, only names: neighbours in the list may be strangers. */
  readonly isOrderKnown: boolean;
}

/** A counter that runs against the clock in more than this share of its steps is no counter. Our own. */
const MOST_BACKWARD_SHARE = 0.3;
/** Fewer steps back than this are clocks set in between. Our own. */
const LEAST_BACKWARD_STEPS = 4;
/** A clock step back of more than this is a step back and not rounding. Source: analysis.md, 1. */
const BACKWARD_MS = -1000;

/**
 * Order in which the frames were taken: per body, then folder number, then counter with its roll-over undone;
 * by clock, name and modification time where there is no counter. The clock never overrules a counter that
 * mostly agrees with it, because clocks jump.
 * @returns bodies by their first known time; every input frame exactly once; the same for any input order
 */
export function orderFrames(frames: readonly SortFrame[]): BodySequence[] {
  const sequences = groupByBody(frames).map(orderBody);
  return sequences.sort((a, b) => compareTimes(firstTime(a.frames), firstTime(b.frames)) || compareFirst(a, b));
}

function orderBody(frames: readonly SortFrame[]): BodySequence {
  const numbers = new Map<SortFrame, FileNumber>();
  for (const frame of frames) {
    const number = fileNumber(frame.name);
    if (number) numbers.set(frame, number);
  }
  if (!isCounter(frames, numbers)) return orderByClock(frames);
  const counted = orderFolders(
    frames.filter((frame) => numbers.has(frame)),
    numbers,
  );
  const byCounter = mergeByClock(counted, frames.filter((frame) => !numbers.has(frame)).sort(compareByClock));
  if (runsAgainstClock(byCounter)) return orderByClock(frames);
  return { frames: byCounter, isOrderKnown: true };
}

/** Names such as checksums end in digits too: then nearly every file has a prefix of its own. */
function isCounter(frames: readonly SortFrame[], numbers: ReadonlyMap<SortFrame, FileNumber>): boolean {
  const prefixes = new Set([...numbers.values()].map((number) => number.prefix));
  return numbers.size * 2 > frames.length && (prefixes.size <= 2 || prefixes.size * 4 <= numbers.size);
}

function orderByClock(frames: readonly SortFrame[]): BodySequence {
  const timed = frames.filter((frame) => frame.metadata.takenAt !== null).length;
  return { frames: [...frames].sort(compareByClock), isOrderKnown: timed * 2 > frames.length };
}

/** Folders one after another; within each, the counter. Folders that share no number count as one. */
function orderFolders(frames: readonly SortFrame[], numbers: ReadonlyMap<SortFrame, FileNumber>): SortFrame[] {
  const groups = new Map<string, SortFrame[]>();
  const areDcf = frames.every((frame) => folderNumber(frame.folder) !== null);
  const areDistinct = new Set([...numbers.values()].map((number) => number.number)).size === numbers.size;
  for (const frame of frames) {
    const key = areDcf || !areDistinct ? (frame.folder ?? "") : "";
    groups.set(key, [...(groups.get(key) ?? []), frame]);
  }
  const folders = [...groups.entries()].map(([folder, members]) => ({
    number: folderNumber(folder),
    members: orderByCounter(members, numbers),
  }));
  const places = unwrapCounter(
    folders.map((folder) => folder.number ?? 0),
    900,
  );
  return folders
    .map((folder, index) => ({ ...folder, place: places[index] ?? 0 }))
    .sort(
      (a, b) =>
        (areDcf ? a.place - b.place : 0) ||
        compareTimes(firstTime(a.members), firstTime(b.members)) ||
        compareNames(a.members[0], b.members[0]),
    )
    .flatMap((folder) => folder.members);
}

function orderByCounter(frames: readonly SortFrame[], numbers: ReadonlyMap<SortFrame, FileNumber>): SortFrame[] {
  const periods = frames.map((frame) => numbers.get(frame)?.period ?? 0);
  const plain = frames.map((frame) => numbers.get(frame)?.number ?? 0);
  const isOnePeriod = periods.every((period) => period === periods[0]);
  const places = isOnePeriod ? unwrapCounter(plain, periods[0] ?? 0) : plain;
  return frames
    .map((frame, index) => ({ frame, place: places[index] ?? 0 }))
    .sort((a, b) => a.place - b.place || compareByClock(a.frame, b.frame))
    .map((entry) => entry.frame);
}

/** Puts frames without a counter before the first counted frame that was taken later. */
function mergeByClock(counted: readonly SortFrame[], others: readonly SortFrame[]): SortFrame[] {
  const merged: SortFrame[] = [...counted];
  for (const frame of others) {
    const time = timeMs(frame);
    const at = time === null ? -1 : merged.findIndex((other) => (timeMs(other) ?? -Infinity) > time);
    merged.splice(at < 0 ? merged.length : at, 0, frame);
  }
  return merged;
}

function runsAgainstClock(frames: readonly SortFrame[]): boolean {
  let known = 0;
  let backward = 0;
  frames.forEach((frame, index) => {
    const before = frames[index - 1];
    const from = before && timeMs(before);
    const to = timeMs(frame);
    if (from === null || from === undefined || to === null) return;
    known++;
    if (to - from < BACKWARD_MS) backward++;
  });
  return backward >= LEAST_BACKWARD_STEPS && backward > known * MOST_BACKWARD_SHARE;
}

function timeMs(frame: SortFrame): number | null {
  return frame.metadata.takenAt?.localMs ?? null;
}

function firstTime(frames: readonly SortFrame[]): number | null {
  for (const frame of frames) if (frame.metadata.takenAt) return frame.metadata.takenAt.localMs;
  return null;
}

function compareTimes(a: number | null, b: number | null): number {
  if (a === null || b === null) return (a === null ? 1 : 0) - (b === null ? 1 : 0);
  return a - b;
}

function compareByClock(a: SortFrame, b: SortFrame): number {
  return compareTimes(timeMs(a), timeMs(b)) || compareNames(a, b);
}

const naturalOrder = new Intl.Collator("en", { numeric: true });

function compareNames(a: SortFrame | undefined, b: SortFrame | undefined): number {
  if (!a || !b) return 0;
  return (
    naturalOrder.compare(a.folder ?? "", b.folder ?? "") ||
    naturalOrder.compare(a.name, b.name) ||
    (a.lastModifiedMs ?? 0) - (b.lastModifiedMs ?? 0) ||
    (a.id < b.id ? -1 : 1)
  );
}

function compareFirst(a: BodySequence, b: BodySequence): number {
  return compareNames(a.frames[0], b.frames[0]);
}
