import sharp, { type Metadata, type Sharp } from "sharp";

import type { Plane } from "@/lib/analysis/types";
import { PictureError, REASONS } from "@/lib/imaging/picture-error";

/**
 * The largest picture that is decoded. Twice the pixels of the largest single frames in use (150 megapixels), and
 * its green channel still fits a quarter of a gigabyte.
 */
export const MAX_PIXELS = 250_000_000;
/** Smaller pictures have no inner pixel to measure. */
const MIN_SIDE_PX = 3;

/** A pixel of a plane and what white is in it. */
export interface DecodedPlane {
  readonly plane: Plane;
  readonly white: number;
}

// One picture at a time in each process: the pool gives every processor its own, and libvips' own threads and its
// cache of operations would only add memory.
sharp.concurrency(1);
sharp.cache(false);

/**
 * Opens a picture for decoding. The first page of several; anything that ends too early or is broken is refused.
 * @param file - the whole file, or its path
 */
export function openPicture(file: Buffer | string): Sharp {
  return sharp(file, { failOn: "error", limitInputPixels: MAX_PIXELS, sequentialRead: true, page: 0, pages: 1 });
}

/**
 * Size, depth and orientation from the header.
 * @throws PictureError when there is no readable header, or the picture is larger or smaller than is read here
 */
export async function readHeader(file: Buffer): Promise<Metadata> {
  let header: Metadata;
  try {
    header = await sharp(file, { failOn: "none", limitInputPixels: false, page: 0, pages: 1 }).metadata();
  } catch (cause) {
    throw toPictureError(cause);
  }
  const { width, height } = header;
  if (width * height > MAX_PIXELS) {
    throw new PictureError("too-large", REASONS.tooLarge(Math.round((width * height) / 1e6), MAX_PIXELS / 1e6));
  }
  if (Math.min(width, height) < MIN_SIDE_PX) throw new PictureError("too-small", REASONS.tooSmall(width, height));
  return header;
}

/**
 * The green channel at full size, as stored (not turned): the only one of a grey picture.
 * @throws PictureError when the pixels cannot be decoded to the end
 */
export async function decodeGreen(file: Buffer, header: Metadata): Promise<DecodedPlane> {
  const is16Bit = header.depth === "ushort";
  const isGrey = header.channels <= 2;
  try {
    // The camera's own levels: turning them into sRGB would change what is measured, and take longer. Not sequential:
    // every pixel is wanted, and reading in one go takes a sixth less time for the same peak of memory.
    const picture = sharp(file, {
      failOn: "error",
      limitInputPixels: MAX_PIXELS,
      page: 0,
      pages: 1,
      ignoreIcc: true,
    });
    if (is16Bit) picture.toColourspace(isGrey ? "grey16" : "rgb16");
    const { data, info } = await picture
      .extractChannel(isGrey ? 0 : 1)
      .raw({ depth: is16Bit ? "ushort" : "uchar" })
      .toBuffer({ resolveWithObject: true });
    return {
      plane: { data: is16Bit ? toUint16(data) : toUint8(data), widthPx: info.width, heightPx: info.height },
      white: is16Bit ? 65535 : 255,
    };
  } catch (cause) {
    throw toPictureError(cause);
  }
}

/** Views on the same bytes, of the exact type that the fast path of the measuring asks for. */
function toUint8(data: Buffer): Uint8Array {
  return new Uint8Array(data.buffer, data.byteOffset, data.byteLength);
}

function toUint16(data: Buffer): Uint16Array {
  const isAligned = data.byteOffset % 2 === 0;
  const bytes = isAligned ? data : Uint8Array.from(data);
  return new Uint16Array(bytes.buffer, bytes.byteOffset, bytes.byteLength >> 1);
}

const TRUNCATED =
  /premature|truncat|unexpected end|end of (file|stream|image|data)|\beof\b|not enough|too short|bad seek/i;

/** What the decoder said, in plain words; its own words stay as the cause. */
export function toPictureError(cause: unknown): PictureError {
  if (cause instanceof PictureError) return cause;
  const message = cause instanceof Error ? cause.message : String(cause);
  if (TRUNCATED.test(message)) return new PictureError("truncated", REASONS.truncated, null, { cause });
  return new PictureError("damaged", REASONS.damaged, null, { cause });
}
