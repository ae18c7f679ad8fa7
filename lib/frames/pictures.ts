import "server-only";
import { readFile } from "node:fs/promises";
import { AppError } from "@/lib/errors/app-error";
import type { FramePicture } from "@/lib/frames/reads";
import type { CropQuery } from "@/lib/frames/schema";
import { cropAtFullSize } from "@/lib/imaging/crop";
import { originalPath, previewPath, thumbnailPath } from "@/lib/storage/paths";

/** Crops decoded at once: each takes a processor for up to 0.1 s and the rows of a 24 MP picture. */
const CROPS_AT_ONCE = 2;
/**
 * From here on a picture is decoded alone: a progressive JPEG is held whole, at 6 bytes a pixel, and two of 250 MP took
 * 3 GB of the web process.
 */
const ALONE_FROM_PX = 60_000_000;

export function readThumbnail(picture: FramePicture): Promise<Uint8Array> {
  return readDerived(thumbnailPath(picture.fileId));
}

export function readPreview(picture: FramePicture): Promise<Uint8Array> {
  return readDerived(previewPath(picture.fileId));
}

/**
 * A piece of the original at 100 %, upright.
 * @throws AppError invalid where the rectangle does not lie inside the frame
 */
export async function cutCrop(picture: FramePicture, { x, y, w, h }: CropQuery, signal: AbortSignal) {
  if (x + w > picture.widthPx || y + h > picture.heightPx) {
    throw new AppError("invalid", `The frame has ${picture.widthPx} x ${picture.heightPx} px: ask for a piece of it.`);
  }
  const slots = picture.widthPx * picture.heightPx < ALONE_FROM_PX ? 1 : CROPS_AT_ONCE;
  return inTurn(slots, signal, () =>
    cropAtFullSize(originalPath(picture.uploadId), picture.orientation, { x, y, widthPx: w, heightPx: h }),
  );
}

async function readDerived(path: string): Promise<Uint8Array> {
  try {
    return await readFile(path);
  } catch (cause) {
    if (!(cause instanceof Error && "code" in cause && cause.code === "ENOENT")) throw cause;
    throw new AppError("not_found", "The preview of this frame is missing on the server; its original is safe.", {
      cause,
    });
  }
}

let free = CROPS_AT_ONCE;
const queue: { readonly slots: number; readonly go: () => void }[] = [];

async function inTurn<Result>(slots: number, signal: AbortSignal, work: () => Promise<Result>): Promise<Result> {
  await new Promise<void>((go) => {
    queue.push({ slots, go });
    startNext();
  });
  try {
    // Whoever has gone on to another frame meanwhile does not wait for this one.
    signal.throwIfAborted();
    return await work();
  } finally {
    free += slots;
    startNext();
  }
}

function startNext(): void {
  for (let next = queue[0]; next && next.slots <= free; next = queue[0]) {
    queue.shift();
    free -= next.slots;
    next.go();
  }
}
