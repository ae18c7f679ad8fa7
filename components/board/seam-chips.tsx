import { classNames } from "@/components/ui/class-names";
import type { BoardLayout } from "@/lib/board/layout";
import type { SeamMark } from "@/lib/board/seam-marks";
import { percent } from "@/lib/board/words";

interface SeamChipsProps {
  readonly marks: readonly SeamMark[];
  readonly layout: BoardLayout;
}

/** Where on the edge to the row above a chip stands, part of the tile's width: clear of the notch at the left. */
const ABOVE_AT = 0.72;

/** Overlaps on the seams of one row: on the edge to the right neighbour, or to the row above. */
export function SeamChips({ marks, layout }: SeamChipsProps) {
  return marks.map((mark) => <SeamChip key={mark.key} mark={mark} layout={layout} />);
}

function SeamChip({ mark, layout }: { readonly mark: SeamMark; readonly layout: BoardLayout }) {
  const stepPx = layout.tileWidthPx + layout.gapPx;
  const isSideways = mark.side === "right";
  // A mark on the map is as long as the edge itself.
  const at = layout.size === "map" ? 0.5 : ABOVE_AT;
  const left = layout.lettersWidthPx + (mark.column - (isSideways ? 0 : 1 - at)) * stepPx - layout.gapPx / 2;
  const top = isSideways ? layout.pictureHeightPx / 2 : 0;
  const pair = `${mark.names[0]} and ${mark.names[1]}`;
  const said = mark.isMisfit
    ? `${pair} do not match where they would overlap`
    : `Overlap of ${pair}: ${percent(mark.overlap)}${mark.isSmall ? ", small" : ""}`;
  const isAlarm = mark.isSmall || mark.isMisfit;
  if (layout.size === "map") {
    const length = isSideways ? layout.pictureHeightPx : layout.tileWidthPx;
    return (
      <span
        role="img"
        aria-label={said}
        style={{ left, top, width: isSideways ? 4 : length, height: isSideways ? length : 4 }}
        className={classNames(
          "pointer-events-none absolute z-20 -translate-x-1/2 -translate-y-1/2 border border-paper",
          isAlarm ? "bg-ochre" : "bg-ink",
        )}
      />
    );
  }
  return (
    <span
      style={{ left, top }}
      className={classNames(
        "figures pointer-events-none absolute z-20 -translate-x-1/2 border px-1 text-sm leading-5 font-semibold whitespace-nowrap",
        isSideways && "-translate-y-1/2",
        isAlarm ? "border-ochre bg-ochre-wash text-ochre-on" : "border-line bg-paper text-ink",
      )}
    >
      <span className="sr-only">{said}</span>
      <span aria-hidden>{mark.isMisfit ? "no match" : mark.overlap === null ? "? %" : percent(mark.overlap)}</span>
    </span>
  );
}
