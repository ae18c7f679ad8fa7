import { useInHand } from "@/components/board/hand";
import { LineMenu } from "@/components/board/line-menu";
import { LOOSE } from "@/components/board/use-board-place";
import { classNames } from "@/components/ui/class-names";
import type { BoardIndex } from "@/lib/board/board-index";
import { isLabelled, type BoardLayout } from "@/lib/board/layout";
import { countOf } from "@/lib/board/words";

interface ColumnNumbersProps {
  readonly index: BoardIndex;
  readonly layout: BoardLayout;
  readonly chosen: string | null;
  readonly onChoose: (name: string | null) => void;
  readonly canEdit: boolean;
}

/** The line of numbers above the grid; it stays in view. In its corner, where letters meet numbers, the loose frames. */
export function ColumnNumbers({ index, layout, chosen, onChoose, canEdit }: ColumnNumbersProps) {
  const { columns } = index.board.grid;
  return (
    <div
      className="sticky top-0 z-30 flex h-10 items-center bg-well"
      style={{ gap: layout.gapPx, minWidth: "fit-content" }}
    >
      <div
        className="sticky left-0 z-10 -mr-px shrink-0 bg-well"
        style={{ width: layout.lettersWidthPx - layout.gapPx }}
      >
        <LooseCell count={index.loose.length} isOpen={chosen === LOOSE} onChoose={onChoose} />
      </div>
      {Array.from({ length: columns }, (_, at) => (
        <span key={at} className="flex shrink-0 justify-center" style={{ width: layout.tileWidthPx }}>
          {isLabelled(at + 1, labelPx(columns, canEdit), layout.tileWidthPx + layout.gapPx) &&
            (canEdit ? (
              <LineMenu index={index} axis="column" at={at + 1} />
            ) : (
              <ColumnNumber at={at + 1} layout={layout} />
            ))}
        </span>
      ))}
    </div>
  );
}

function ColumnNumber({ at, layout }: { readonly at: number; readonly layout: BoardLayout }) {
  return (
    <span
      aria-hidden
      className={classNames(
        "figures bg-paper font-bold",
        layout.size === "map" ? "px-0.5 text-[0.75rem] leading-4" : "px-1.5 text-sm leading-5",
      )}
    >
      {at}
    </span>
  );
}

interface LooseCellProps {
  readonly count: number;
  readonly isOpen: boolean;
  readonly onChoose: (name: string | null) => void;
}

/** The corner cell: opens the loose frames; while something is carried it is there even without any, to be put down on. */
function LooseCell({ count, isOpen, onChoose }: LooseCellProps) {
  const isCarrying = useInHand(({ carried }) => carried !== null);
  if (count === 0 && !isCarrying) return null;
  return (
    <button
      type="button"
      data-place={LOOSE}
      aria-expanded={isOpen}
      aria-label={`${countOf(count, "loose frame")}: frames in no stack`}
      onClick={() => onChoose(isOpen ? null : LOOSE)}
      className={classNames(
        "relative min-h-6 border bg-paper px-1 text-sm leading-6 font-semibold whitespace-nowrap pointer-coarse:min-h-11",
        isOpen ? "border-petrol outline-2 outline-petrol" : "border-line hover:bg-ink hover:text-paper",
      )}
    >
      Loose {count}
    </button>
  );
}

/** Room for the widest number and its padding, or for a menu's target, px. */
function labelPx(columns: number, canEdit: boolean): number {
  return Math.max(canEdit ? 24 : 0, String(columns).length * 8 + (canEdit ? 8 : 5));
}
