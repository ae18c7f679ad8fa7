import sharp, { type Sharp } from "sharp";

import { storedPlace, swapsSides, uprightSize } from "@/lib/analysis/orientation";
import { openPicture, toPictureError } from "@/lib/imaging/decode";
import { PictureError, REASONS } from "@/lib/imaging/picture-error";
import type { Orientation } from "@/lib/metadata/types";

/** A part of the upright picture, whole px. */
export interface CropRectangle {
  readonly x: number;
  readonly y: number;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Higher than a preview's: a crop is looked at pixel by pixel. */
const JPEG_QUALITY = 90;
/** Largest side of a crop; more is a preview's business and would only take memory. */
export const MAX_CROP_SIDE_PX = 2048;

/**
 * A part of a picture at 100 %, straight from the original: one pixel of the crop is one pixel of the picture.
 * @param path - the original
 * @param orientation - the one that was stored with the frame
 * @param rectangle - upright px; moved and cut so that it lies within the picture
 * @returns JPEG, upright, sRGB, without metadata
 * @throws PictureError when the picture cannot be decoded
 */
export async function cropAtFullSize(
  path: string,
  orientation: Orientation,
  rectangle: CropRectangle,
): Promise<Buffer> {
  try {
    const { width, height } = await sharp(path, { limitInputPixels: false, failOn: "none" }).metadata();
    const inside = fitInside(rectangle, uprightSize(width, height, orientation));
    const stored = toStored(inside, { columns: width, rows: height }, orientation);
    // Two steps: within one pipeline the cut would come after the turn, and the whole picture would be turned for it.
    const cut = await openPicture(path).extract(stored).png({ compressionLevel: 0 }).toBuffer();
    return await turn(sharp(cut), orientation).jpeg({ quality: JPEG_QUALITY, chromaSubsampling: "4:4:4" }).toBuffer();
  } catch (cause) {
    throw toPictureError(cause);
  }
}

function fitInside(wanted: CropRectangle, size: { widthPx: number; heightPx: number }): CropRectangle {
  const sides = [wanted.x, wanted.y, wanted.widthPx, wanted.heightPx];
  if (!sides.every(Number.isFinite)) throw new PictureError("too-small", REASONS.tooSmall(0, 0));
  const side = (length: number, most: number) => Math.max(1, Math.min(Math.round(length), most, MAX_CROP_SIDE_PX));
  const widthPx = side(wanted.widthPx, size.widthPx);
  const heightPx = side(wanted.heightPx, size.heightPx);
  const start = (at: number, most: number) => Math.max(0, Math.min(Math.round(at), most));
  return {
    x: start(wanted.x, size.widthPx - widthPx),
    y: start(wanted.y, size.heightPx - heightPx),
    widthPx,
    heightPx,
  };
}

function toStored(
  { x, y, widthPx, heightPx }: CropRectangle,
  { columns, rows }: { columns: number; rows: number },
  orientation: Orientation,
): { left: number; top: number; width: number; height: number } {
  const [x0, y0] = storedPlace(x, y, columns, rows, orientation);
  const [x1, y1] = storedPlace(x + widthPx - 1, y + heightPx - 1, columns, rows, orientation);
  const isTurned = swapsSides(orientation);
  return {
    left: Math.min(x0, x1),
    top: Math.min(y0, y1),
    width: isTurned ? heightPx : widthPx,
    height: isTurned ? widthPx : heightPx,
  };
}

/** What makes a stored picture upright (Exif 2.2, tag 0x0112). sharp turns first and mirrors then. */
function turn(picture: Sharp, orientation: Orientation): Sharp {
  switch (orientation) {
    case 1:
      return picture;
    case 2:
      return picture.flop();
    case 3:
      return picture.rotate(180);
    case 4:
      return picture.flip();
    case 5:
      return picture.rotate(90).flop();
    case 6:
      return picture.rotate(90);
    case 7:
      return picture.rotate(270).flop();
    case 8:
      return picture.rotate(270);
  }
}
