import type { BoardQuestion, BoardStack } from "@/lib/board/model";
import { tileName } from "@/lib/board/tile-name";

/**
 * Name of the tile that a question is about now: where its first stack lies that is still there. Stacks move and lines
 * come in between after it was asked; a question about no stack (a hole) keeps the tile that it was asked about.
 * @param stacks - the board's, by id
 * @returns null where the stack has no place
 */
export function questionTile(
  { stackIds, tile }: Pick<BoardQuestion, "stackIds" | "tile">,
  stacks: ReadonlyMap<string, Pick<BoardStack, "row" | "column">>,
): string | null {
  const stack = stackIds.map((id) => stacks.get(id)).find((found) => found !== undefined);
  if (!stack) return tile;
  return stack.row === null || stack.column === null ? null : tileName(stack.row, stack.column);
}
