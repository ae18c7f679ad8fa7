import { Button } from "@/components/ui/button";
import type { BoardTile } from "@/lib/board/board-index";

interface TakeChoiceProps {
  readonly tile: BoardTile;
  /** The take on the bench. */
  readonly chosenId: string;
  readonly onChoose: (stackId: string) => void;
}

/** Which take of a tile lies on the bench; nothing where there is only one. */
export function TakeChoice({ tile, chosenId, onChoose }: TakeChoiceProps) {
  if (tile.takes.length < 2) return null;
  return (
    <span role="group" aria-label={`Takes of ${tile.name}`} className="flex gap-1">
      {tile.takes.map((take) => (
        <Button
          key={take.id}
          data-take={take.id}
          size="slim"
          tone={take.id === chosenId ? "plain" : "bare"}
          aria-pressed={take.id === chosenId}
          onClick={() => onChoose(take.id)}
        >
          Take {take.take}
          {take.isChosenTake ? " (in the merge)" : ""}
        </Button>
      ))}
    </span>
  );
}
