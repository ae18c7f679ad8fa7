import type { BoardQuestion } from "@/lib/board/model";
import { tileOfToken, type StackLookUp } from "@/lib/board/name-tokens";
import { tileName } from "@/lib/board/tile-name";

/**
 * Name of the tile that a question is about now: where its first stack lies that is still there. Stacks move and lines
 * come in between after it was asked. A hole shifts with the stacks of its row and column.
 * @param stacks - the board's, by id
 * @returns null where the stack has no place
 */
export function questionTile(
  { stackIds, tile }: Pick<BoardQuestion, "stackIds" | "tile">,
  stacks: StackLookUp,
): string | null {
  const stack = stackIds.map((id) => stacks.get(id)).find((found) => found !== undefined);
  if (!stack) return tile === null ? null : tileOfToken(tile, stacks);
  return stack.row === null || stack.column === null ? null : tileName(stack.row, stack.column);
}
