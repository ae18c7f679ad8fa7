import { sharedTiles, tieChance } from "./place-chances";
import { isKept, nameOf, tileOf, type SortedDraft } from "./sorted-draft";
import type { Tie } from "./ties";
import type { ProposedQuestion, ShotOrder } from "./types";

const SEVERITY = { order: 85, shared: 75 } as const;
/** Below this a place is asked about. Our own. */
const SURE_ENOUGH = 0.8;
const MOST_NAMES = 8;
const MOST_QUESTIONS = 4;
/** A fifth of the weight of one sure edge. */
const BARELY_HELD = 6;
/** Another place is named where it has at least the reciprocal of what the present one has. */
const RIVAL_SHARE = 3;

/** A part of the grid whose place may be wrong as a whole. */
interface Block {
  readonly members: readonly number[];
  readonly evidence: string;
}

/**
 * Doubts about places: one question for each row, column or block that may have moved as a whole.
 * @param chances - of a right place, by stack index
 */
export function questionsOfPlaces(draft: SortedDraft, chances: readonly number[]): ProposedQuestion[] {
  const shared = sharedTiles(draft);
  const byOrder = blocksByOrder(draft);
  const asked = new Set([...shared.flat(), ...byOrder.flatMap(({ members }) => members)]);
  const blocks = [...byOrder, ...blocksByTies(draft, chances, asked)];
  const few = blocks.length > MOST_QUESTIONS ? [joinBlocks(blocks)] : blocks;
  return [...few.map((block) => askBlock(draft, block)), ...askShared(draft, shared)];
}

function joinBlocks(blocks: readonly Block[]): Block {
  const members = [...new Set(blocks.flatMap((block) => block.members))];
  return {
    members,
    evidence: `${blocks.length} parts of the grid hang on the rest by little or nothing that matches.`,
  };
}

function askBlock(draft: SortedDraft, { members, evidence }: Block): ProposedQuestion {
  const names = namesOf(draft, members);
  const isOne = members.length === 1;
  const all = hingesOn(draft, members) ? draft.stacks.filter((stack) => isKept(draft, stack)) : [];
  const numbering = all.length > 0 ? " The names of all tiles count from there." : "";
  const own = members.map((index) => draft.stacks[index]?.id ?? "");
  return {
    key: `order ${[...own].sort().join(" ")}`,
    kind: "order",
    message: isOne ? `Is ${names} in its place?` : `Are ${names} in their places?`,
    evidence: `${evidence}${numbering}`,
    frameIds: [],
    stackIds: [...new Set([...own, ...all.map((stack) => stack.id)])],
    tile: tileOf(draft, members[0] ?? 0),
    answers: [
      { label: isOne ? "Leave it there" : "Leave them there", action: { type: "keep" } },
      {
        label: isOne ? "Take it out of the grid" : "Take them out of the grid",
        action: { type: "take-out", stackIds: own },
      },
    ],
    severity: SEVERITY.order,
  };
}

/** True where nothing else is in the first row, or in the first column: if it moves, every tile gets another name. */
function hingesOn(draft: SortedDraft, members: readonly number[]): boolean {
  const inside = new Set(members);
  const isOther = (side: "row" | "column") =>
    draft.places.some((place, index) => place[side] === 1 && !inside.has(index));
  return draft.stacks.length > members.length && (!isOther("row") || !isOther("column"));
}

/** Stacks that the order shot alone has placed, where it leaves more than one way or begins or ends with them. */
function blocksByOrder(draft: SortedDraft): Block[] {
  const held = draft.layout.ties.pieces[0];
  const isByOrder = (index: number) => {
    const stack = draft.stacks[index];
    if (!stack || stack.fixed || !isKept(draft, stack) || draft.stacks.length === 1) return false;
    return draft.places[index]?.row === null || !held?.has(index) || held.size === 1;
  };
  return draft.bodies.flatMap((list) => {
    const runs: number[][] = [];
    list.forEach((index, at) => {
      if (!isByOrder(index)) return;
      const last = runs.at(-1);
      if (last && isByOrder(list[at - 1] ?? -1)) last.push(index);
      else runs.push([index]);
    });
    return runs.flatMap((members): Block[] => {
      const isOpen = members[0] === list[0] || members.at(-1) === list.at(-1);
      const isUnsure = members.some((index) => draft.layout.spots[index]?.isUnsure !== false);
      if (!isOpen && !isUnsure) return [];
      return [{ members, evidence: orderEvidence(draft, members) }];
    });
  });
}

function orderEvidence(draft: SortedDraft, members: readonly number[]): string {
  const isOne = members.length === 1;
  const walk = draft.layout.walk && describeWalk(draft.layout.walk.walk);
  const why = `${isOne ? "It shows" : "They show"} too little detail to match the neighbours`;
  const unplaced = members.every((index) => draft.places[index]?.row === null);
  if (unplaced || !walk) return `${why}, and the order shot leaves no place for ${isOne ? "it" : "them"}.`;
  const [before, after] = besideInOrder(draft, members);
  const between =
    before && after ? `between ${before} and ${after}` : before ? `after ${before}` : after ? `before ${after}` : "";
  return `${why}, so the order shot alone speaks: ${walk}, ${between}. Compare the edges with the tiles beside.`;
}

function besideInOrder(draft: SortedDraft, members: readonly number[]): (string | null)[] {
  const list = draft.bodies.find((body) => body.includes(members[0] ?? -1)) ?? [];
  const before = list[list.indexOf(members[0] ?? -1) - 1];
  const after = list[list.indexOf(members.at(-1) ?? -1) + 1];
  return [before, after].map((index) => (index === undefined ? null : tileOf(draft, index)));
}

function describeWalk({ along, from, turns }: ShotOrder): string {
  return `${along} from the ${from.replace("-", " ")}${turns ? ", turning at each end" : ""}`;
}

/** Parts that little holds to the rest; of those that overlap, one. */
function blocksByTies(draft: SortedDraft, chances: readonly number[], asked: ReadonlySet<number>): Block[] {
  // Sure for another reason than the pictures: placed before, or by the order shot.
  const isConfirmed = ({ members }: Tie) => members.every((index) => (chances[index] ?? 0) >= SURE_ENOUGH);
  const isAsked = new Set(asked);
  const weak = draft.layout.ties.ties
    .map((tie) => ({ tie, chance: tieChance(tie) }))
    .filter(({ tie, chance }) => chance < SURE_ENOUGH && !isConfirmed(tie))
    .sort((a, b) => a.chance - b.chance);
  return weak.flatMap(({ tie }): Block[] => {
    const members = [...tie.members].sort((a, b) => a - b);
    if (members.some((index) => isAsked.has(index) || draft.stacks[index]?.fixed)) return [];
    for (const index of members) isAsked.add(index);
    return [{ members, evidence: tieEvidence(tie) }];
  });
}

function tieEvidence({ agreeing, clashing, rival, against, members }: Tie): string {
  const held = agreeing < BARELY_HELD ? "barely" : "weakly";
  const first =
    members.length === 1
      ? `Its picture matches the tiles around it ${held}`
      : `They match each other, but the tiles around them ${held}`;
  const better = against > agreeing ? "better" : "nearly as well";
  const other = rival && against * RIVAL_SHARE > agreeing ? `; ${describeOffset(rival)} would fit ${better}` : "";
  const shared = clashing > 0 ? "; another stack lies at the same place and shows something else" : "";
  return `${first}${other}${shared}. Compare the edges with the tiles beside.`;
}

function describeOffset({ columns, rows }: { readonly columns: number; readonly rows: number }): string {
  const parts = [
    rows !== 0 ? `${count(rows, "row")} ${rows > 0 ? "lower" : "higher"}` : "",
    columns !== 0 ? `${count(columns, "column")} further ${columns > 0 ? "right" : "left"}` : "",
  ];
  return parts.filter((part) => part !== "").join(" and ");
}

function count(amount: number, unit: string): string {
  return Math.abs(amount) === 1 ? `one ${unit}` : `${Math.abs(amount)} ${unit}s`;
}

function namesOf(draft: SortedDraft, members: readonly number[]): string {
  const names = members.map((index) => nameOf(draft, index));
  const shown = names.length > MOST_NAMES ? names.slice(0, MOST_NAMES - 1) : names;
  const rest = names.length - shown.length;
  const last = rest > 0 ? `${rest} more` : (shown.pop() ?? "");
  return shown.length === 0 ? last : `${shown.join(", ")} and ${last}`;
}

function askShared(draft: SortedDraft, shared: readonly (readonly number[])[]): ProposedQuestion[] {
  return shared.map((members) => {
    const tile = tileOf(draft, members[0] ?? 0) ?? "this tile";
    const ids = members.map((index) => draft.stacks[index]?.id ?? "");
    const firsts = members.map((index) => draft.stacks[index]?.frames[0]?.frame.name ?? "");
    return {
      key: `shared ${[...ids].sort().join(" ")}`,
      kind: "order",
      message: `Do the ${members.length} stacks at ${tile} show the same tile?`,
      evidence: `Those from ${firsts.slice(0, -1).join(", ")} and ${firsts.at(-1) ?? ""} on came out at one place, but their pictures do not match; one may belong elsewhere.`,
      frameIds: [],
      stackIds: ids,
      tile: tileOf(draft, members[0] ?? 0),
      answers: [{ label: `Keep both at ${tile}`, action: { type: "keep" } }],
      severity: SEVERITY.shared,
    };
  });
}
