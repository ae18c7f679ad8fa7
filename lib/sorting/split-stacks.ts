import type { PairMeasure } from "@/lib/analysis/types";
import type { BodySequence } from "./order-frames";
import type { PairStore } from "./pair-store";
import { findPauseLimit, type PauseLimit } from "./pause-limit";
import { pauseSeconds } from "./pauses";
import { isTextured, judgePair, leaningOf, shiftFraction, type Verdict } from "./judge-pair";
import type { SortFrame } from "./types";

export type JoinBasis = "person" | "pictures" | "pictures and time" | "time" | "count" | "nothing";

/** Whether a frame belongs to the stack of the frame before it in the order taken, and why. */
export interface Join {
  readonly before: SortFrame;
  readonly after: SortFrame;
  readonly measure: PairMeasure;
  readonly pauseS: number | null;
  readonly verdict: Verdict;
  readonly isSame: boolean;
  readonly basis: JoinBasis;
}

export interface SplitResult {
  /** Frames of each stack in the order taken; stacks in the order of their first frame. */
  readonly runs: readonly (readonly SortFrame[])[];
  /** By the id of the later frame. */
  readonly joins: ReadonlyMap<string, Join>;
  /** Frames unlike both neighbours, which are like each other. */
  readonly odd: ReadonlySet<string>;
  readonly limit: PauseLimit | null;
}

export interface SplitOptions {
  readonly longestPauseSeconds: number | null;
  /** True, false where a person or an earlier sorting has decided; null where the computation may. */
  readonly isJoined: (before: SortFrame, after: SortFrame) => boolean | null;
}

/** Time may overrule "probably different" only where it errs on fewer of the decided pairs. Source: analysis.md, 4. */
const MOST_TIME_ERRORS = 0.03;
/** Fewer moves seen for sure say too little about how long a move takes. Our own. */
const LEAST_SURE_MOVES = 3;
const LONGEST_ODD_RUN = 2;
/** Share of plain pairs that must match for the others to mean something. Our own. */
const LEAST_PLAIN_MATCHES = 0.6;
/** Frames that match better and clearer than this need no turning. Our own: a roll of 1 degree leaves 0.6. */
const CLEAR_MATCH_NCC = 0.55;
const CLEAR_MATCH_RATIO = 1.3;
const LEAST_TURNED_CONTRAST = 1;
/** Where neither texture nor time decide, plain frames this much alike are taken together. Our own. */
const LEANING_NCC = 0.4;
/** A frame knocked aside by less than this is still of its tile; the deviation is reported. Our own. */
const LARGEST_KNOCK = 0.25;

/** Cuts each body's frames into stacks: pictures first, the pause where they say nothing. */
export async function splitStacks(
  sequences: readonly BodySequence[],
  store: PairStore,
  options: SplitOptions,
  onDone?: (done: number, total: number) => void,
): Promise<SplitResult> {
  const pairs = sequences.flatMap(({ frames }) => consecutive(frames).map(([a, b]) => [a.id, b.id] as const));
  await store.measureAll(pairs, onDone);
  await store.measureTurned(
    sequences.flatMap(({ frames }) =>
      consecutive(frames)
        .filter(([a, b]) => mayBeTurned(a, b, store))
        .map(([a, b]) => [a.id, b.id] as const),
    ),
  );
  const links = sequences.map((sequence) => consecutive(sequence.frames).map(([a, b]) => judgeLink(a, b, store)));
  const doPlainMatch = plainUsuallyMatch(links.flat());
  const limit = options.longestPauseSeconds
    ? { seconds: options.longestPauseSeconds, errorShare: 0 }
    : findLimit(links.flat());
  const odd = new Set<string>();
  for (const sequence of sequences) await findOdd(sequence.frames, store, limit, odd);
  const joins = new Map<string, Join>();
  const runs: SortFrame[][] = [];
  sequences.forEach((sequence) => {
    cutSequence({ frames: sequence.frames, store, limit, odd, options, doPlainMatch }, joins, runs);
  });
  return { runs, joins, odd, limit };
}

/** Textured frames that match badly or at several places alike. */
function mayBeTurned(a: SortFrame, b: SortFrame, store: PairStore): boolean {
  const measure = store.find(a.id, b.id);
  if (!measure || !isTextured(a) || !isTextured(b) || measure.contrast < LEAST_TURNED_CONTRAST) return false;
  return measure.ncc < CLEAR_MATCH_NCC || measure.peakRatio < CLEAR_MATCH_RATIO;
}

function consecutive(frames: readonly SortFrame[]): [SortFrame, SortFrame][] {
  return frames.slice(1).map((after, index) => [frames[index] ?? after, after]);
}

interface Link {
  readonly before: SortFrame;
  readonly after: SortFrame;
  readonly measure: PairMeasure;
  readonly pauseS: number | null;
  readonly verdict: Verdict;
}

function judgeLink(before: SortFrame, after: SortFrame, store: PairStore): Link {
  const measure = store.find(before.id, after.id);
  if (!measure) throw new Error(`pair ${before.id}, ${after.id} was not measured`);
  const verdict = judgePair(before, after, measure);
  return { before, after, measure, pauseS: pauseSeconds(before, after), verdict };
}

/** From the pairs that the pictures decide for sure; from the probable ones too where those are too few. */
function findLimit(links: readonly Link[]): PauseLimit | null {
  const timed = links.flatMap((link) => (link.pauseS === null ? [] : [{ ...link, seconds: link.pauseS }]));
  const pausesOf = (verdicts: readonly Verdict[]) =>
    timed
      .filter(({ verdict }) => verdicts.includes(verdict))
      .map(({ seconds, verdict }) => ({ seconds, isSame: verdict === "same" }));
  const all = timed.map((link) => link.seconds);
  const sure = pausesOf(["same", "different"]);
  if (sure.filter(({ isSame }) => !isSame).length >= LEAST_SURE_MOVES) return findPauseLimit(sure, all);
  return findPauseLimit(pausesOf(["same", "different", "probably different"]), all);
}

/** Marks one or two frames in a row that match neither neighbour while the neighbours match each other. */
async function findOdd(
  frames: readonly SortFrame[],
  store: PairStore,
  limit: PauseLimit | null,
  odd: Set<string>,
): Promise<void> {
  for (let start = 1; start < frames.length - 1; start++) {
    for (let length = 1; length <= LONGEST_ODD_RUN; length++) {
      const before = frames[start - 1];
      const after = frames[start + length];
      const within = frames.slice(start, start + length);
      if (!before || !after || !isOddCandidate(before, within, after, store)) continue;
      if (judgePair(before, after, await store.measure(before.id, after.id)) !== "same") continue;
      for (const frame of within) odd.add(frame.id);
      start += length;
      break;
    }
  }
}

function isOddCandidate(before: SortFrame, within: readonly SortFrame[], after: SortFrame, store: PairStore): boolean {
  const [first, last] = [within[0], within.at(-1)];
  if (!first || !last) return false;
  const entry = judgeLink(before, first, store);
  const exit = judgeLink(last, after, store);
  if (entry.verdict === "same" || exit.verdict === "same") return false;
  if (entry.verdict === "unknown" && exit.verdict === "unknown") return !isTextured(first) && isTextured(before);
  if (entry.verdict === "probably different" || exit.verdict === "probably different") return true;
  // Both matched elsewhere: an excursion only if the way back undoes the way out.
  const x = entry.measure.xPx + exit.measure.xPx;
  const y = entry.measure.yPx + exit.measure.yPx;
  return within.length === 1 && shiftFraction({ ...entry.measure, xPx: x, yPx: y }, before) < 0.07;
}

interface CutInput {
  readonly frames: readonly SortFrame[];
  readonly store: PairStore;
  readonly limit: PauseLimit | null;
  readonly odd: ReadonlySet<string>;
  readonly options: SplitOptions;
  /** In this shoot even plain frames of one tile can be matched. */
  readonly doPlainMatch: boolean;
}

function cutSequence(input: CutInput, joins: Map<string, Join>, runs: SortFrame[][]): void {
  let last: SortFrame | null = null;
  for (const frame of input.frames) {
    if (input.odd.has(frame.id)) {
      const knock = last && input.store.find(last.id, frame.id);
      if (!last || !knock || !isKnock(last, frame, knock)) continue;
      const link = judgeLink(last, frame, input.store);
      joins.set(frame.id, { ...link, isSame: true, basis: "time" });
      runs.at(-1)?.push(frame);
      continue;
    }
    if (!last) {
      runs.push([frame]);
      last = frame;
      continue;
    }
    const join = decide(judgeLink(last, frame, input.store), input);
    joins.set(frame.id, join);
    if (join.isSame) runs.at(-1)?.push(frame);
    else runs.push([frame]);
    last = frame;
  }
}

/** True where the odd frame still shows its tile, only pushed aside. */
function isKnock(before: SortFrame, frame: SortFrame, measure: PairMeasure): boolean {
  return judgePair(before, frame, measure) === "different" && shiftFraction(measure, before) < LARGEST_KNOCK;
}

/** True where most pairs of plain frames show the same: then those that do not show something else. */
function plainUsuallyMatch(links: readonly Link[]): boolean {
  const leanings = links
    .filter(({ before, after }) => !isTextured(before) && !isTextured(after))
    .map(({ before, measure }) => leaningOf(measure, before));
  return leanings.filter((leaning) => leaning === "alike").length >= LEAST_PLAIN_MATCHES * leanings.length;
}

function decide(given: Link, { limit, options, doPlainMatch }: CutInput): Join {
  const isUnlike = doPlainMatch && given.verdict === "unknown" && leaningOf(given.measure, given.before) === "unlike";
  const link: Link = isUnlike ? { ...given, verdict: "probably different" } : given;
  const forced = options.isJoined(link.before, link.after);
  if (forced !== null) return { ...link, isSame: forced, basis: "person" };
  const isShort = link.pauseS === null || limit === null ? null : link.pauseS <= limit.seconds;
  if (options.longestPauseSeconds !== null && isShort === false) return { ...link, isSame: false, basis: "time" };
  if (link.verdict === "same" || link.verdict === "different") {
    const isSame = link.verdict === "same";
    return { ...link, isSame, basis: isShort === isSame ? "pictures and time" : "pictures" };
  }
  if (link.verdict === "probably different") {
    const isTimeTrusted = limit !== null && limit.errorShare <= MOST_TIME_ERRORS;
    if (isShort && isTimeTrusted) return { ...link, isSame: true, basis: "time" };
    return { ...link, isSame: false, basis: isShort === false ? "pictures and time" : "pictures" };
  }
  if (isShort !== null) return { ...link, isSame: isShort, basis: "time" };
  return { ...link, isSame: link.measure.ncc >= LEANING_NCC, basis: "nothing" };
}
