"use client";

import { EllipsisVertical } from "lucide-react";
import { useBoardCommands } from "@/components/board/board-commands";
import { SetAsideItems } from "@/components/board/set-aside-items";
import { useHand } from "@/components/board/hand";
import { Menu, MenuItem, MenuLine, MenuLink } from "@/components/ui/menu";
import type { BoardFrame } from "@/lib/board/model";
import { newId } from "@/lib/ids";

interface FrameMenuProps {
  readonly projectId: string;
  readonly frame: BoardFrame;
  readonly isReference: boolean;
  /** It is the first of its stack, or in none: there is nothing to split. */
  readonly isFirst: boolean;
  /** Null: nothing to compare it with. */
  readonly onCompare: (() => void) | null;
  readonly tabIndex: number;
}

/** Everything that can be done with one frame, as a plain menu. */
export function FrameMenu({ projectId, frame, isReference, isFirst, onCompare, tabIndex }: FrameMenuProps) {
  const hand = useHand();
  const { run } = useBoardCommands();
  const { id, name, stackId, setAside } = frame;
  const moving = { kind: "frames", frameIds: [id] } as const;
  return (
    <Menu
      label={`Actions for ${name}`}
      trigger={<EllipsisVertical aria-hidden size={16} />}
      className="size-7 px-0!"
      tabIndex={tabIndex}
    >
      <MenuItem onSelect={() => hand.ask({ moving, text: "", verb: "move" })}>Move to…</MenuItem>
      <MenuItem onSelect={() => hand.pickUp(moving, "taps")}>Pick up, then choose a tile</MenuItem>
      {onCompare && <MenuItem onSelect={onCompare}>Compare with the reference</MenuItem>}
      {stackId !== null && !isReference && setAside === null && (
        <MenuItem onSelect={() => run({ type: "choose-reference", stackId, frameId: id })}>
          Make it the reference
        </MenuItem>
      )}
      {stackId !== null && !isFirst && (
        <MenuItem
          onSelect={() => {
            const newStackId = newId();
            hand.awaitStack(newStackId);
            run({ type: "split-stack", stackId, atFrameId: id, newStackId, place: null });
          }}
        >
          Split the stack before it
        </MenuItem>
      )}
      <MenuLine />
      {setAside === null ? (
        <SetAsideItems frameIds={[id]} />
      ) : (
        <MenuItem onSelect={() => run({ type: "bring-back", frameIds: [id] })}>Bring back</MenuItem>
      )}
      <MenuLine />
      {frame.files.map((file) => (
        <MenuLink key={file.id}>
          <a href={`/api/projects/${projectId}/files/${file.id}/original`} download={file.name}>
            Download {file.name}
          </a>
        </MenuLink>
      ))}
    </Menu>
  );
}
