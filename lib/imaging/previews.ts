import type { Sharp } from "sharp";

import { openPicture, toPictureError } from "@/lib/imaging/decode";

/** Longest sides and quality: analysis.md, "Previews". At 2 000 px and less the JPEG decoder itself can shrink. */
export const PREVIEW_LONG_SIDE_PX = 2000;
export const THUMBNAIL_LONG_SIDE_PX = 320;
const JPEG_QUALITY = 80;
/** Behind transparent parts: the middle grey of the wells in which pictures are shown. */
const BACKDROP = "#777777";

export interface Previews {
  readonly preview: Buffer;
  readonly thumbnail: Buffer;
}

/**
 * Preview and thumbnail of a picture: upright, sRGB, without metadata, JPEG; never larger than the picture.
 * @throws PictureError when the picture cannot be decoded
 */
export async function makePreviews(file: Buffer): Promise<Previews> {
  try {
    const preview = await toJpeg(openPicture(file).autoOrient(), PREVIEW_LONG_SIDE_PX);
    return { preview, thumbnail: await toJpeg(openPicture(preview), THUMBNAIL_LONG_SIDE_PX) };
  } catch (cause) {
    throw toPictureError(cause);
  }
}

function toJpeg(picture: Sharp, longSidePx: number): Promise<Buffer> {
  return picture
    .resize({ width: longSidePx, height: longSidePx, fit: "inside", withoutEnlargement: true })
    .flatten({ background: BACKDROP })
    .jpeg({ quality: JPEG_QUALITY })
    .toBuffer();
}
