import type { MouseEvent } from "react";
import { Picture } from "@/components/board/picture";
import type { BoardFrame } from "@/lib/board/model";
import { thumbnailUrl } from "@/lib/frames/picture-urls";

const WIDTH_PX = 168;

interface SpotMapProps {
  readonly projectId: string;
  readonly reference: BoardFrame;
  readonly spot: { readonly x: number; readonly y: number };
  readonly size: { readonly widthPx: number; readonly heightPx: number };
  readonly onMove: (x: number, y: number) => void;
}

/** The whole reference, small, with the piece that is seen at 100 %. A click moves it there; the arrow buttons do the same by keyboard. */
export function SpotMap({ projectId, reference, spot, size, onMove }: SpotMapProps) {
  const scale = WIDTH_PX / reference.widthPx;
  const onClick = (event: MouseEvent<HTMLDivElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    onMove((event.clientX - box.left) / scale, (event.clientY - box.top) / scale);
  };
  const w = Math.min(size.widthPx, reference.widthPx);
  const h = Math.min(size.heightPx, reference.heightPx);
  const x = Math.min(Math.max(0, spot.x - w / 2), reference.widthPx - w);
  const y = Math.min(Math.max(0, spot.y - h / 2), reference.heightPx - h);
  return (
    <div
      onClick={onClick}
      aria-hidden
      className="relative cursor-crosshair overflow-hidden bg-well"
      style={{ width: WIDTH_PX, height: reference.heightPx * scale }}
    >
      <Picture
        src={thumbnailUrl(projectId, reference.id)}
        alt=""
        widthPx={WIDTH_PX}
        heightPx={Math.round(reference.heightPx * scale)}
      />
      <span
        className="absolute border-2 border-petrol ring-2 ring-paper"
        style={{ left: x * scale, top: y * scale, width: w * scale, height: h * scale }}
      />
    </div>
  );
}
