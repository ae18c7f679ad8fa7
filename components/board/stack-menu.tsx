"use client";

import { useBoardCommands } from "@/components/board/board-commands";
import { useHand } from "@/components/board/hand";
import { BoundaryItems } from "@/components/rail/boundary-items";
import { Menu, MenuItem, MenuLine } from "@/components/ui/menu";
import type { BoardIndex, BoardTile } from "@/lib/board/board-index";
import type { BoardStack } from "@/lib/board/model";
import { nameOfStack } from "@/lib/board/moving";
import { countOf } from "@/lib/board/words";

interface StackMenuProps {
  readonly index: BoardIndex;
  readonly tile: BoardTile;
  /** The take that is meant. */
  readonly stack: BoardStack;
}

/** Everything that can be done with one stack, as a plain menu. */
export function StackMenu({ index, tile, stack }: StackMenuProps) {
  const hand = useHand();
  const { run } = useBoardCommands();
  const { id: stackId } = stack;
  const name = nameOfStack(index, stackId);
  const frameIds = (index.framesOfStack.get(stackId) ?? []).map(({ id }) => id);
  const open = index.board.questions.filter(({ stackIds }) => stackIds.includes(stackId)).length;
  const moving = { kind: "stack", stackId } as const;
  const settle = (isSettled: boolean) => run({ type: "settle", target: { kind: "stack", stackId, isSettled } });
  return (
    <Menu trigger="Change…" label={`Change ${name}`} tone="plain">
      <MenuItem onSelect={() => hand.ask({ moving, text: "", verb: "move" })}>Move {name} to…</MenuItem>
      <MenuItem onSelect={() => hand.pickUp(moving, "taps")}>Pick up, then choose a place</MenuItem>
      <MenuItem onSelect={() => hand.ask({ moving: { kind: "frames", frameIds }, text: "", verb: "merge" })}>
        Merge {name} with…
      </MenuItem>
      {!stack.isChosenTake && (
        <MenuItem onSelect={() => run({ type: "choose-take", stackId })}>
          Put take {stack.take} in the merge of {tile.name}
        </MenuItem>
      )}
      {stack.row !== null && (
        <MenuItem
          onSelect={() => {
            hand.awaitStack(stackId);
            run({ type: "place-stack", stackId, place: null });
          }}
        >
          Take out of the grid
        </MenuItem>
      )}
      <BoundaryItems index={index} stackId={stackId} />
      <MenuItem onSelect={() => hand.select(frameIds)}>Select its {countOf(frameIds.length, "frame")}</MenuItem>
      <MenuLine />
      {stack.isSettled ? (
        <MenuItem onSelect={() => settle(false)}>Take back that it is settled</MenuItem>
      ) : (
        <MenuItem isDisabled={open > 0} onSelect={() => settle(true)}>
          {open > 0 ? `To be settled: answer ${countOf(open, "question")} first` : "Mark as settled"}
        </MenuItem>
      )}
    </Menu>
  );
}
