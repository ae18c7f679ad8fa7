"use client";

import { useHand } from "@/components/board/hand";
import { Menu, MenuItem } from "@/components/ui/menu";
import type { BoardIndex } from "@/lib/board/board-index";
import { framesNotSettled, framesOfLine, softFrames } from "@/lib/board/selection";
import { rowLetters } from "@/lib/board/tile-name";

interface SelectMenuProps {
  readonly index: BoardIndex;
  /** The tile that is open: its row can be selected. */
  readonly chosen: string | null;
}

/** More rows than this are too long a list: then only the open tile's row is in it. */
const ROWS_MOST = 12;

/** Selects many frames at once, by what they are. */
export function SelectMenu({ index, chosen }: SelectMenuProps) {
  const hand = useHand();
  const { rows } = index.board.grid;
  const openRow = chosen === null ? null : (index.tiles.get(chosen)?.row ?? null);
  const listed =
    rows <= ROWS_MOST ? Array.from({ length: rows }, (_, at) => at + 1) : openRow === null ? [] : [openRow];
  return (
    <Menu trigger="Select…">
      <SelectItem label="All soft frames" frameIds={() => softFrames(index)} />
      <SelectItem label="All frames of stacks that are not settled" frameIds={() => framesNotSettled(index)} />
      {listed.map((row) => (
        <SelectItem
          key={row}
          label={`All frames in row ${rowLetters(row)}`}
          frameIds={() => framesOfLine(index, "row", row)}
        />
      ))}
      <MenuItem onSelect={() => hand.select([])}>Nothing</MenuItem>
    </Menu>
  );
}

interface SelectItemProps {
  readonly label: string;
  /** Counted when the menu opens, not with every change of the board. */
  readonly frameIds: () => readonly string[];
}

function SelectItem({ label, frameIds }: SelectItemProps) {
  const hand = useHand();
  const ids = frameIds();
  return (
    <MenuItem isDisabled={ids.length === 0} onSelect={() => hand.select(ids)}>
      <span>{label}</span>
      <span className="figures ml-auto pl-4">{ids.length}</span>
    </MenuItem>
  );
}
