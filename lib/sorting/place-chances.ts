import { isKept, type SortedDraft } from "./sorted-draft";
import type { Tie } from "./ties";

// What the chance of a right place comes from. Our own, from the generated shoots with seeds 101 to 299.
/** How much a contradicting edge weighs against an agreeing one: what chance matches is seldom of one mind. */
const DOUBT_FACTOR = 0.6;
/** Squared weight of agreeing edges that leaves an even chance: less than an edge just above chance has. */
const EVEN_CHANCE = 1;
const HIGHEST = 0.995;
const BY_PERSON = 1;
const BY_EARLIER_SORTING = 0.99;
const ONLY_STACK = 0.9;
const BY_ORDER = 0.96;
const BY_UNSURE_ORDER = 0.6;
/** Two stacks on one tile that do not show the same: one of them is wrong. */
const SHARED = 0.5;

/** Probability that a part of the grid lies where it was put, 0 to 1. */
export function tieChance({ agreeing, against, clashing }: Tie): number {
  const doubt = DOUBT_FACTOR * against + clashing;
  return Math.min(HIGHEST, agreeing ** 2 / (agreeing ** 2 + doubt ** 2 + EVEN_CHANCE));
}

/** Probability that each stack is at its row and column, by stack index; 0 for those that have none. */
export function placeChances(draft: SortedDraft): number[] {
  const held = draft.layout.ties.pieces[0] ?? new Set<number>();
  const byTie = draft.stacks.map(() => HIGHEST);
  for (const tie of draft.layout.ties.ties) {
    const chance = tieChance(tie);
    for (const index of tie.members) byTie[index] = Math.min(byTie[index] ?? 1, chance);
  }
  const shared = new Set(sharedTiles(draft).flat());
  return draft.stacks.map(({ index, fixed }) => {
    const spot = draft.layout.spots[index];
    if (!spot || draft.places[index]?.row === null) return fixed?.byPerson ? BY_PERSON : 0;
    if (spot.basis === "fixed") return fixed?.byPerson ? BY_PERSON : BY_EARLIER_SORTING;
    if (draft.stacks.length === 1) return ONLY_STACK;
    const pictures = held.has(index) && held.size > 1 ? (byTie[index] ?? 0) : 0;
    const order = spot.basis !== "order" ? 0 : spot.isUnsure ? BY_UNSURE_ORDER : BY_ORDER;
    return Math.min(shared.has(index) ? SHARED : 1, Math.max(pictures, order));
  });
}

/** Stacks of one tile, of which at least one shows nothing that another of them shows too. */
export function sharedTiles(draft: SortedDraft): number[][] {
  const tiles = new Map<string, number[]>();
  for (const stack of draft.stacks) {
    const { row, column } = draft.places[stack.index] ?? {};
    if (!row || !column || !isKept(draft, stack) || stack.fixed?.row) continue;
    tiles.set(`${row} ${column}`, [...(tiles.get(`${row} ${column}`) ?? []), stack.index]);
  }
  const isSame = new Set(draft.layout.ties.alike.map(([a, b]) => `${Math.min(a, b)} ${Math.max(a, b)}`));
  return [...tiles.values()].filter((members) => {
    if (members.length < 2) return false;
    return members.some((a) => !members.some((b) => a !== b && isSame.has(`${Math.min(a, b)} ${Math.max(a, b)}`)));
  });
}
