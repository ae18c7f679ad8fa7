"use client";

import { Picture } from "@/components/board/picture";
import { useScreenDensity } from "@/components/board/use-screen-density";
import type { CropCentre } from "@/lib/board/layout";
import type { BoardFrame } from "@/lib/board/model";
import { cropUrl, thumbnailUrl } from "@/lib/frames/picture-urls";

interface CropProps {
  readonly projectId: string;
  readonly frame: BoardFrame;
  /** Null: the whole frame, as large as fits. */
  readonly centre: CropCentre | null;
  /** Room for it, CSS px. */
  readonly size: { readonly widthPx: number; readonly heightPx: number };
  /** Empty where a name stands beside it. */
  readonly alt: string;
}

/** A piece of a frame at 100 %: one pixel of the frame is one pixel of the screen, however dense the screen. */
export function Crop({ projectId, frame, centre, size, alt }: CropProps) {
  const density = useScreenDensity();
  // In the style too: the page gives pictures a height of their own otherwise.
  const room = { ...size, style: { width: size.widthPx, height: size.heightPx } };
  if (centre === null) {
    return <Picture src={thumbnailUrl(projectId, frame.id)} alt={alt} {...room} className="object-contain" />;
  }
  const src = cropUrl(projectId, frame.id, {
    widthPx: frame.widthPx,
    heightPx: frame.heightPx,
    centreXPx: centre.centreXPx,
    centreYPx: centre.centreYPx,
    cropWidthPx: size.widthPx * density,
    cropHeightPx: size.heightPx * density,
  });
  return <Picture src={src} density={density} alt={alt} {...room} className="object-none" />;
}
