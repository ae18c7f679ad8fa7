import "server-only";
import { type FileHandle, open } from "node:fs/promises";
import { AppError } from "@/lib/errors/app-error";
import type { OriginalFile } from "@/lib/frames/reads";
import type { FileAnswer } from "@/lib/http/answer-file";
import { attachment } from "@/lib/http/attachment";
import type { ByteRange } from "@/lib/http/byte-range";
import { storedBytes } from "@/lib/storage/disk";
import { originalPath } from "@/lib/storage/paths";

/** Read at a time: what is held of a file of any size. */
const PIECE_BYTES = 256 * 1024;

/**
 * A stored original, to be sent as it came in, under the name that it had.
 * @throws AppError not_found where its bytes are missing on the disk
 */
export async function openOriginal(file: OriginalFile): Promise<FileAnswer> {
  const sizeBytes = await storedBytes(file.uploadId);
  if (sizeBytes === null) {
    throw new AppError(
      "not_found",
      "This original is missing in the storage. Tell the administrator: a backup may have it.",
    );
  }
  return {
    sizeBytes,
    sha256: file.sha256,
    mediaType: file.mediaType ?? "application/octet-stream",
    disposition: attachment(file.name, ""),
    open: (range) => streamFile(originalPath(file.uploadId), range),
  };
}

/** Reads a piece whenever the last one has been sent; closes at the end, and where the reader goes. */
function streamFile(path: string, { first, last }: ByteRange): ReadableStream<Uint8Array> {
  // Not before somebody reads: an answer that is never read leaves nothing open.
  let opened: Promise<FileHandle> | null = null;
  const close = async () => (await opened)?.close();
  let at = first;
  return new ReadableStream<Uint8Array>(
    {
      async pull(controller) {
        opened ??= open(path, "r");
        const piece = Buffer.allocUnsafe(Math.min(PIECE_BYTES, last - at + 1));
        const { bytesRead } = await (await opened).read(piece, 0, piece.length, at);
        at += bytesRead;
        if (bytesRead > 0) controller.enqueue(piece.subarray(0, bytesRead));
        if (bytesRead > 0 && at <= last) return;
        await close();
        if (bytesRead === 0) throw new Error(`${path} ends before byte ${last}`);
        controller.close();
      },
      cancel: close,
    },
    // Nothing is read ahead of what is asked for.
    { highWaterMark: 0 },
  );
}
