import type { Component } from "./lattice";
import type { WalkPlacement } from "./place-by-walk";
import type { Tie } from "./ties";
import { followedShare } from "./walks";

/** Ties of more weight than this are never doubted: 30 is one sure edge. Our own. */
const WEAK_TIE = 24;
/** What one hole less on the walk weighs against edges. Our own. */
const ORDER_WEIGHT = 8;
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

/**
 * Parts of the grid that hang on it by weak edges only and contradict the order shot: the walk places them better.
 * @returns the parts, each with the labels that it had
 */
export function freeByOrder(labels: Component, ties: readonly Tie[], context: OrderContext): Component[] {
  const { bodies, layWalk, isFixed } = context;
  const weak = ties
    .filter(({ agreeing, members }) => agreeing < WEAK_TIE && !members.some(isFixed))
    .sort((a, b) => a.agreeing - a.against - (b.agreeing - b.against))
    .slice(0, Math.min(MOST_TRIES, Math.floor(MOST_WORK / Math.max(1, labels.size))));
  const freed: Component[] = [];
  if (weak.length === 0) return freed;
  const kept = new Map(labels);
  let cost = layWalk(kept)?.cost ?? 0;
  for (const { members, agreeing, against } of weak) {
    const part = new Map([...kept].filter(([index]) => members.includes(index)));
    if (part.size < members.length || cost * ORDER_WEIGHT <= agreeing - against) continue;
    const rest = new Map([...kept].filter(([index]) => !part.has(index)));
    const steps = bodies.map((list) => list.flatMap((index) => rest.get(index) ?? []));
    if (followedShare(steps) < LEAST_FOLLOWED) continue;
    const without = layWalk(rest)?.cost ?? Infinity;
    if ((cost - without) * ORDER_WEIGHT <= agreeing - against) continue;
    freed.push(part);
    for (const index of members) kept.delete(index);
    cost = without;
  }
  return freed;
}
