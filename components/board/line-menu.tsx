"use client";

import { useBoardCommands } from "@/components/board/board-commands";
import { useHand } from "@/components/board/hand";
import { Menu, MenuItem, MenuLine } from "@/components/ui/menu";
import type { BoardIndex } from "@/lib/board/board-index";
import { framesOfLine } from "@/lib/board/selection";
import { rowLetters } from "@/lib/board/tile-name";
import { countOf } from "@/lib/board/words";

interface LineMenuProps {
  readonly index: BoardIndex;
  readonly axis: "row" | "column";
  /** 1 is the top, or the left. */
  readonly at: number;
}

const CHIP =
  "figures min-h-6! min-w-6 bg-paper px-1! py-0! text-sm leading-5 font-bold no-underline! hover:bg-ink hover:text-paper";

/** The letter of a row or the number of a column: a menu that adds and removes lines there. */
export function LineMenu({ index, axis, at }: LineMenuProps) {
  const hand = useHand();
  const { run } = useBoardCommands();
  const label = axis === "row" ? rowLetters(at) : String(at);
  const name = `${axis} ${label}`;
  const stacks = index.board.stacks.filter((stack) => stack[axis] === at).length;
  const lines = axis === "row" ? index.board.grid.rows : index.board.grid.columns;
  const [before, after] = axis === "row" ? ["above", "below"] : ["at the left of", "at the right of"];
  return (
    <Menu trigger={label} label={`Change ${name}`} align="start" className={CHIP}>
      <MenuItem onSelect={() => run({ type: "add-line", axis, at })}>
        Add a {axis} {before} {label}
      </MenuItem>
      <MenuItem onSelect={() => run({ type: "add-line", axis, at: at + 1 })}>
        Add a {axis} {after} {label}
      </MenuItem>
      {lines > 1 && (
        <MenuItem isDisabled={stacks > 0} onSelect={() => run({ type: "remove-line", axis, at })}>
          {stacks > 0 ? `To remove ${name}, move its ${countOf(stacks, "stack")} first` : `Remove ${name}`}
        </MenuItem>
      )}
      {stacks > 0 && <MenuLine />}
      {stacks > 0 && (
        <MenuItem onSelect={() => hand.select(framesOfLine(index, axis, at))}>Select all frames in {name}</MenuItem>
      )}
    </Menu>
  );
}
