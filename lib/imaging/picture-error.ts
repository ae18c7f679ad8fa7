export type PictureErrorCode =
  | "empty"
  | "not-a-picture"
  | "unsupported"
  | "too-large"
  | "too-small"
  | "truncated"
  | "damaged"
  | "crashed"
  | "timeout";

/** Why a picture cannot be read, in words for the person who brought it in; stops nothing else. */
export class PictureError extends Error {
  override readonly name = "PictureError";
  constructor(
    readonly code: PictureErrorCode,
    /** A sentence or two: what is wrong and what to do next. */
    readonly reason: string,
    /** What is known of the file all the same; null where it was never read to its end. */
    readonly file: { readonly sha256: string; readonly bytes: number } | null = null,
    options?: { cause?: unknown },
  ) {
    super(reason, options);
  }
}

const COPY_AGAIN = "Copy it from the card again.";

/** The reasons, in one place: plain words, what to do next. */
export const REASONS = {
  empty: `The file is empty (0 bytes). ${COPY_AGAIN}`,
  notAPicture: "This is not a picture. Bring in JPEG, TIFF, PNG or WebP files.",
  misnamed: `The file is named like a picture, but what is inside is not JPEG, TIFF, PNG or WebP. ${COPY_AGAIN}`,
  unsupported: (format: string) => `${format} pictures cannot be read here. Save it as JPEG or TIFF and bring that in.`,
  tooLarge: (megapixels: number, most: number) =>
    `The picture has ${megapixels} megapixels; at most ${most} can be read. Bring in a single frame, not a joined picture.`,
  tooManyBytes: (megabytes: number, most: number) =>
    `The file has ${megabytes} MB; at most ${most} can be read as a picture. Save it compressed, or as JPEG.`,
  tooSmall: (widthPx: number, heightPx: number) =>
    `The picture is only ${widthPx} x ${heightPx} px, too small to measure. Bring in the full-size frame.`,
  truncated: `The file is cut short: its end is missing. ${COPY_AGAIN}`,
  damaged: `The picture is damaged and cannot be decoded. ${COPY_AGAIN}`,
  crashed: `Reading the picture failed so badly that the reader had to be restarted. The file is probably damaged. ${COPY_AGAIN}`,
  timeout: (seconds: number) =>
    `Reading the picture took longer than ${seconds} s and was stopped. Save it again as JPEG or TIFF and bring that in.`,
  rawAlone: "A raw file without its JPEG cannot be shown yet. Bring in the JPEG or TIFF of the same name as well.",
} as const;
