import type { Place } from "@/lib/board/look-up";
import type { BoardStack } from "@/lib/board/model";
import { tileName } from "@/lib/board/tile-name";

/*
 * What a sorting says outlives the names that tiles have at that moment: lines come in between, stacks are moved. So its
 * texts carry tokens instead of names, and whoever shows, prints or records one has them replaced.
 */

/** A stack as a person would call it: "A3", "A3, take 2", "the stack from HARB0013". */
export function stackToken(id: string): string {
  return `{stack:${id}}`;
}

/** The tile that a stack lies at, whichever take it is: "A3". */
export function tileToken(id: string): string {
  return `{tile:${id}}`;
}

/** A place without a stack, by what lies in its row and in its column: it shifts with them as lines come and go. */
export interface Hole {
  readonly row: HoleLine;
  readonly column: HoleLine;
}

export interface HoleLine {
  /** Stacks of the line; of several, most tell. None: the edge of the grid, line 0. */
  readonly stackIds: readonly string[];
  /** How many lines further down or right the hole is: 0 in a line that has stacks. */
  readonly further: number;
}

export function holeToken({ row, column }: Hole): string {
  const ids = (line: HoleLine) => line.stackIds.join(",");
  return `{hole:${ids(row)}:${ids(column)}:${row.further}:${column.further}}`;
}

type NamedStack = Pick<BoardStack, "id" | "row" | "column" | "take">;
export type StackLookUp = ReadonlyMap<string, Pick<NamedStack, "row" | "column">>;

const TOKEN = /\{(stack|tile|hole):([^{}\s]+)\}/g;

/**
 * The function that puts present names into a text. What is no token stays as it is.
 * @param frames - in the order taken: a stack without a place is called by its first
 */
export function namer(
  stacks: ReadonlyMap<string, NamedStack>,
  frames: readonly { readonly name: string; readonly stackId: string | null }[],
): (text: string) => string {
  const firsts = new Map<string, string>();
  for (const { name, stackId } of frames) if (stackId !== null && !firsts.has(stackId)) firsts.set(stackId, name);
  const nameStack = (id: string, withTake: boolean): string => {
    const stack = stacks.get(id);
    const first = firsts.get(id);
    if (!stack) return "a stack that is gone";
    if (stack.row === null || stack.column === null) {
      return first === undefined ? "a stack without a place" : `the stack from ${first}`;
    }
    const tile = tileName(stack.row, stack.column);
    return withTake && stack.take > 1 ? `${tile}, take ${stack.take}` : tile;
  };
  const nameOne = (_: string, kind: string, content: string): string =>
    kind === "hole" ? (nameHole(content, stacks) ?? "a place that is gone") : nameStack(content, kind === "stack");
  return (text) => (text.includes("{") ? text.replace(TOKEN, nameOne) : text);
}

/** Name of the tile that a token says, or of one that was stored as such; null: it has no place now. */
export function tileOfToken(stored: string, stacks: StackLookUp): string | null {
  const [, kind, content = ""] = new RegExp(`^${TOKEN.source}$`).exec(stored) ?? [];
  if (kind === undefined) return stored;
  if (kind === "hole") return nameHole(content, stacks);
  const { row = null, column = null } = stacks.get(content) ?? {};
  return row === null || column === null ? null : tileName(row, column);
}

function nameHole(content: string, stacks: StackLookUp): string | null {
  const [rowIds = "", columnIds = "", down, across] = content.split(":");
  const row = lineNow("row", rowIds, stacks);
  const column = lineNow("column", columnIds, stacks);
  return row === null || column === null ? null : tileName(row + Number(down), column + Number(across));
}

/** Where most of the stacks lie; of as many, where the first does. */
function lineNow(axis: keyof Place, ids: string, stacks: StackLookUp): number | null {
  if (ids === "") return 0;
  const lines = ids.split(",").flatMap((id) => stacks.get(id)?.[axis] ?? []);
  const votes = (line: number) => lines.filter((other) => other === line).length;
  return [...lines].sort((a, b) => votes(b) - votes(a))[0] ?? null;
}
