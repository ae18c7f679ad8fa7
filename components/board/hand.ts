"use client";

import { createContext, use, useSyncExternalStore } from "react";
import { targetKey, type Moving, type Target } from "@/lib/board/moving";
import { rangeOf } from "@/lib/board/selection";

/** What is picked up, and what it is held over. */
export interface Carried {
  readonly moving: Moving;
  readonly target: Target | null;
  /** Ids of the frames that are picked up by themselves, not with their stack. */
  readonly frameIds: ReadonlySet<string>;
  /** taps: the frame was picked up by a button, the next tap says where it goes. */
  readonly by: "pointer" | "keys" | "taps";
}

/** What the "Move to" window is open for. */
export interface Asked {
  readonly moving: Moving;
  /** What stands in its field when it opens. */
  readonly text: string;
  /** merge: two stacks become one. */
  readonly verb: "move" | "merge";
}

export interface HandState {
  readonly selected: ReadonlySet<string>;
  /** Where a range begins. */
  readonly anchor: string | null;
  readonly carried: Carried | null;
  readonly asked: Asked | null;
}

const EMPTY: HandState = { selected: new Set(), anchor: null, carried: null, asked: null };

/**
 * What a person has chosen and picked up. It lives outside of React's state so that of thousands of tiles and frames
 * only those whose look changes are drawn again while something is dragged.
 */
export class Hand {
  private state = EMPTY;
  private readonly listeners = new Set<() => void>();
  /** Scrolls the board to a place that may not be drawn; set by whoever scrolls. */
  reveal: ((target: Target) => void) | null = null;
  private awaited: string | null = null;

  readonly get = () => this.state;

  readonly subscribe = (listener: () => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  select(frameIds: readonly string[]) {
    this.set({ selected: new Set(frameIds), anchor: frameIds[0] ?? null });
  }

  /** Only this frame; nothing where it alone was selected. */
  selectOnly(frameId: string) {
    const { selected } = this.state;
    this.select(selected.has(frameId) && selected.size === 1 ? [] : [frameId]);
  }

  toggle(frameId: string) {
    const selected = new Set(this.state.selected);
    if (!selected.delete(frameId)) selected.add(frameId);
    this.set({ selected, anchor: frameId });
  }

  /**
   * From where the range began to this frame.
   * @param order - ids of the list, in its order; @param from - where it begins if it has not begun in this list
   */
  extend(order: readonly string[], frameId: string, from = frameId) {
    const { anchor: begun, selected } = this.state;
    const anchor = begun !== null && selected.size > 0 && order.includes(begun) ? begun : from;
    this.set({ selected: new Set(rangeOf(order, anchor, frameId)), anchor });
  }

  pickUp(moving: Moving, by: Carried["by"], target: Target | null = null) {
    this.set({ carried: { moving, by, target, frameIds: framesOf(moving) } });
  }

  /** Picked up by a click on a handle, with all that are selected if it is one of them; not while something is held. */
  tap(moving: Moving) {
    if (this.state.carried) return;
    const { selected } = this.state;
    const isOne = moving.kind === "frames" && moving.frameIds.every((id) => selected.has(id));
    this.pickUp(isOne ? { kind: "frames", frameIds: [...selected] } : moving, "taps");
  }

  /** Held over another target. @returns whether it is another one */
  aim(target: Target | null, moving?: Moving): boolean {
    const { carried } = this.state;
    if (!carried || (moving === undefined && targetKey(carried.target) === targetKey(target))) return false;
    const next = moving ? { moving, frameIds: framesOf(moving) } : {};
    this.set({ carried: { ...carried, ...next, target } });
    return true;
  }

  /** A stack that this person is making without a place: whoever scrolls brings it into view when it is there. */
  awaitStack(stackId: string) {
    this.awaited = stackId;
  }

  /** The first of these that was awaited; it is awaited no longer. */
  takeAwaited<Item extends { readonly stack: { readonly id: string } }>(items: readonly Item[]): Item | undefined {
    const made = items.find(({ stack }) => stack.id === this.awaited);
    if (made) this.awaited = null;
    return made;
  }

  letGo() {
    if (this.state.carried) this.set({ carried: null });
  }

  ask(asked: Asked | null) {
    this.set({ asked });
  }

  private set(change: Partial<HandState>) {
    this.state = { ...this.state, ...change };
    for (const listener of this.listeners) listener();
  }
}

function framesOf(moving: Moving): ReadonlySet<string> {
  return new Set(moving.kind === "frames" ? moving.frameIds : []);
}

export const HandContext = createContext<Hand | null>(null);

/** @throws Error outside of the board */
export function useHand(): Hand {
  const hand = use(HandContext);
  if (!hand) throw new Error("There is no board here.");
  return hand;
}

/** A part of what is in hand; drawn anew only when that part changes. @param choose - must answer equal values for equal states */
export function useInHand<Part>(choose: (state: HandState) => Part): Part {
  const hand = useHand();
  return useSyncExternalStore(
    hand.subscribe,
    () => choose(hand.get()),
    () => choose(EMPTY),
  );
}
