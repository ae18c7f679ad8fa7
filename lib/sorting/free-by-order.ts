import type { Component } from "./lattice";
import type { WalkPlacement } from "./place-by-walk";
import type { Tie } from "./ties";
import { followedShare } from "./walks";

/** Ties of more weight than this are never doubted: 30 is one sure edge. Our own. */
const WEAK_TIE = 24;
/** What one hole less on the walk weighs against edges. Our own. */
const ORDER_WEIGHT = 8;
/** Of two parts that free the walk alike the smaller one is wrong. Our own. */
const MEMBER_PRICE = 2;
/** A walk that explains fewer of the steps proves nothing. Our own. */
const LEAST_FOLLOWED = 0.7;
/** Bounds the time: tries times stacks. */
const MOST_WORK = 3000;
const MOST_TRIES = 16;

export interface OrderContext {
  /** Stack indices of each camera in the order shot. */
  readonly bodies: readonly (readonly number[])[];
  readonly layWalk: (placed: Component) => WalkPlacement | null;
  readonly isFixed: (index: number) => boolean;
}

interface WeakPart {
  readonly members: readonly number[];
  /** What holds it to the rest. */
  readonly weight: number;
}

/**
 * Parts of the grid that hang on it by weak edges only and contradict the order shot: the walk places them better.
 * @returns the parts, each with the labels that it had
 */
export function freeByOrder(labels: Component, ties: readonly Tie[], context: OrderContext): Component[] {
  const { layWalk, isFixed } = context;
  const weak = ties
    .map((tie): WeakPart => ({ members: tie.members, weight: tie.agreeing - tie.against - tie.clashing }))
    .filter(({ weight, members }) => weight < WEAK_TIE && !members.some(isFixed))
    .sort((a, b) => a.weight - b.weight)
    .slice(0, Math.min(MOST_TRIES, Math.floor(MOST_WORK / Math.max(1, labels.size))));
  const freed: Component[] = [];
  let kept = labels;
  let cost = weak.length > 0 ? (layWalk(labels)?.cost ?? 0) : 0;
  for (;;) {
    const best = bestOf(weak.flatMap((part) => tryFree(part, kept, cost, context) ?? []));
    if (!best) return freed;
    freed.push(best.part);
    [kept, cost] = [best.rest, best.cost];
  }
}

interface Try {
  readonly part: Component;
  readonly rest: Component;
  /** Of the walk, once the part is free. */
  readonly cost: number;
  /** In the weight of edges. */
  readonly gain: number;
}

function bestOf(tries: readonly Try[]): Try | null {
  return tries.reduce<Try | null>((best, next) => (best && best.gain >= next.gain ? best : next), null);
}

/** What it brings to let the walk place a part; null where it brings nothing. */
function tryFree({ members, weight }: WeakPart, kept: Component, cost: number, context: OrderContext): Try | null {
  const part = new Map([...kept].filter(([index]) => members.includes(index)));
  const price = weight + MEMBER_PRICE * members.length;
  if (part.size < members.length || cost * ORDER_WEIGHT <= price) return null;
  const rest = new Map([...kept].filter(([index]) => !part.has(index)));
  const steps = context.bodies.map((list) => list.flatMap((index) => rest.get(index) ?? []));
  if (followedShare(steps) < LEAST_FOLLOWED) return null;
  const without = context.layWalk(rest)?.cost ?? Infinity;
  const gain = (cost - without) * ORDER_WEIGHT - price;
  return gain > 0 ? { part, rest, cost: without, gain } : null;
}
