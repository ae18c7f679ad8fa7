import { appraiseStack, areBracketed } from "./appraise-stack";
import { chooseTakes } from "./choose-takes";
import { collectEdges } from "./collect-edges";
import type { StackDraft } from "./draft";
import type { Edge } from "./edges";
import { findPositions } from "./find-positions";
import { findSeams } from "./find-seams";
import { findSoftStacks, type SharedStrip } from "./soft-stacks";

import { gatherStacks, joinFacts, type StackSeed } from "./gather-stacks";
import { noiseFloorOf } from "./noise-floor";
import { numberPlaces } from "./number-places";
import { orderFrames, type BodySequence } from "./order-frames";
import { PairStore } from "./pair-store";
import { placeStacks } from "./place-stacks";
import { splitDoubles } from "./split-doubles";
import { splitStacks } from "./split-stacks";
import type { MeasurePair, Proposal, SortFrame, SortInput, SortProgress } from "./types";
import { writeProposal } from "./write-proposal";

/** Mean brightness under which a frame shows nothing: a cap on the lens. Levels of 255. Our own. */
const BLACK_LEVEL = 4;

/**
 * Sorts frames into stacks and stacks into a grid, and asks where it is not sure.
 * Pure but for `measurePair`: same input, same output; the input is never changed.
 * @param measurePair - measures two frames by id; called about n times for n frames, and for up to s (s - 1) / 2 of s
 *   stacks (4 s beyond 60 stacks)
 * @returns every input frame exactly once, in the order taken
 * **Method**: analysis.md, "Method", steps 1 to 8; decision files in docs/decisions say where we differ.
 */
export async function sortFrames(
  input: SortInput,
  measurePair: MeasurePair,
  onProgress: (progress: SortProgress) => void = () => undefined,
): Promise<Proposal> {
  const { facts, options } = input;
  const store = new PairStore(input.frames, measurePair);
  const sequences = orderFrames(input.frames);
  const order = sequences.flatMap((sequence) => sequence.frames);
  onProgress({ step: "order", done: order.length, total: order.length });

  const black = findBlack(order, new Set(facts.stacks.flatMap((stack) => stack.frameIds)));
  const left = new Set([...facts.looseFrameIds, ...(facts.heldFrameIds ?? []), ...black]);
  const sorted = sequences.map((sequence) => without(sequence, left));
  const split = splitDoubles(
    await splitStacks(
      sorted,
      store,
      { longestPauseSeconds: options.longestPauseSeconds, isJoined: joinFacts(facts) },
      (done, total) => onProgress({ step: "stacks", done, total }),
    ),
  );
  const seeds = gatherStacks(split.runs, facts, order);
  await store.measureAll(
    seeds.flatMap(({ frames }) => frames.slice(1).map((frame, at) => [frames[at]?.id ?? "", frame.id] as const)),
  );
  const stacks = appraiseAll(seeds, store, input);
  const graph = await collectEdges(stacks, store, (done, total) => onProgress({ step: "grid", done, total }));
  const bodies = stacksByBody(stacks, sequences);
  const layout = placeStacks(stacks, graph, bodies, options);
  const places = numberPlaces(stacks, layout.spots);
  const { takes, doubts } = chooseTakes(stacks, places);
  const chosen = takes.map((take) => take.isChosenTake);
  const found = findPositions(stacks, places, graph);
  const seams = findSeams(stacks, places, chosen, found);
  const softStacks = findSoftStacks(stacks, stripsOf(found.trusted, stacks));
  onProgress({ step: "done", done: order.length, total: order.length });
  const drawn = { layout, places, takes, takeDoubts: doubts, positions: found.positions, seams, softStacks };
  return writeProposal({ order, stacks, bodies, ...drawn, graph, split, black, options }, facts);
}

/** What two stacks that overlap both show. */
function stripsOf(edges: readonly Edge[], stacks: readonly StackDraft[]): SharedStrip[] {
  return edges.map(({ a, b, x, y }) => {
    const { widthPx, heightPx } = stacks[a]?.hub.measurements ?? { widthPx: 0, heightPx: 0 };
    const longSidePx = Math.max(widthPx, heightPx);
    return { a, b, xPx: x * longSidePx, yPx: y * longSidePx };
  });
}

/** Black frames mark nothing but an end or a start, unless the whole shoot is black. */
function findBlack(order: readonly SortFrame[], fixed: ReadonlySet<string>): Set<string> {
  const black = order.filter((frame) => frame.measurements.meanBrightness < BLACK_LEVEL && !fixed.has(frame.id));
  return new Set(black.length * 2 > order.length ? [] : black.map((frame) => frame.id));
}

function without(sequence: BodySequence, left: ReadonlySet<string>): BodySequence {
  return { ...sequence, frames: sequence.frames.filter((frame) => !left.has(frame.id)) };
}

function appraiseAll(
  seeds: readonly StackSeed[],
  store: PairStore,
  { frames, facts, options }: SortInput,
): StackDraft[] {
  const isBracketed = areBracketed(seeds.map((seed) => seed.frames));
  const shared = {
    store,
    softLimit: options.softLimit,
    settled: facts.setAside,
    isBracketed,
    noise: noiseFloorOf(frames),
  };
  return seeds.map((seed, index) => appraiseStack({ ...seed, ...shared, index }));
}

/** A stack is of the camera that took its first frame. */
function stacksByBody(stacks: readonly StackDraft[], sequences: readonly BodySequence[]): number[][] {
  const bodyOf = new Map<string, number>();
  sequences.forEach((sequence, body) => {
    for (const frame of sequence.frames) bodyOf.set(frame.id, body);
  });
  return sequences.map((_, body) =>
    stacks.filter((stack) => bodyOf.get(stack.frames[0]?.frame.id ?? "") === body).map((stack) => stack.index),
  );
}
