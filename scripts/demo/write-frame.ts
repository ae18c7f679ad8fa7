import { mkdir, utimes, writeFile } from "node:fs/promises";
import path from "node:path";
import sharp from "sharp";
import type { FrameSize } from "./pose";

/** What the invented camera writes about a frame. */
export interface FrameExif {
  /** Clock of the camera as if it were UTC, ms. */
  readonly localMs: number;
  readonly hasFraction: boolean;
  /** Minutes east of UTC; null: not written. */
  readonly offsetMinutes: number | null;
  readonly make: string;
  readonly model: string;
  readonly serial: string | null;
  readonly lens: string | null;
  /** As a fraction: "1/250". */
  readonly exposure: string;
  readonly aperture: number;
  readonly iso: number;
  readonly focalLengthMm: number;
}

export interface FrameFile {
  /** "/" between names. */
  readonly file: string;
  /** Null: written without any. */
  readonly exif: FrameExif | null;
  /** 1 upright, 6 and 8 for a camera held upright; stored as the sensor lies. */
  readonly orientation: 1 | 6 | 8;
  /** Becomes the file's modification time, ms. */
  readonly modifiedMs: number;
}

const DEFAULT_QUALITY = 90;

const twoDigits = (value: number) => String(value).padStart(2, "0");

/** "2027:04:18 09:41:12": Exif 2.2 (JEITA CP-3451), tag 0x9003. */
export function exifTime(localMs: number): string {
  const time = new Date(localMs);
  const date = [time.getUTCFullYear(), twoDigits(time.getUTCMonth() + 1), twoDigits(time.getUTCDate())].join(":");
  return `${date} ${[time.getUTCHours(), time.getUTCMinutes(), time.getUTCSeconds()].map(twoDigits).join(":")}`;
}

/** "+02:00": Exif 2.31, tag 0x9011. */
export function exifOffset(minutes: number): string {
  const size = Math.abs(minutes);
  return `${minutes < 0 ? "-" : "+"}${twoDigits(Math.floor(size / 60))}:${twoDigits(size % 60)}`;
}

function exifTags(exif: FrameExif): { IFD0: Record<string, string>; IFD2: Record<string, string> } {
  const hundredths = Math.floor((((exif.localMs % 1000) + 1000) % 1000) / 10);
  const IFD2: Record<string, string> = {
    DateTimeOriginal: exifTime(exif.localMs),
    ExposureTime: exif.exposure,
    FNumber: `${Math.round(exif.aperture * 10)}/10`,
    ISOSpeedRatings: String(exif.iso),
    FocalLength: `${Math.round(exif.focalLengthMm * 10)}/10`,
    ExposureMode: "1",
    WhiteBalance: "1",
  };
  if (exif.hasFraction) IFD2.SubSecTimeOriginal = twoDigits(hundredths);
  if (exif.offsetMinutes !== null) IFD2.OffsetTimeOriginal = exifOffset(exif.offsetMinutes);
  if (exif.serial !== null) IFD2.BodySerialNumber = exif.serial;
  if (exif.lens !== null) IFD2.LensModel = exif.lens;
  // sharp keeps the times only under IFD2; under IFD0 they vanish without a word.
  return { IFD0: { Make: exif.make, Model: exif.model, DateTime: exifTime(exif.localMs) }, IFD2 };
}

/** Writes one JPEG below `directory`, making its folder. @returns its bytes */
export async function writeFrame(
  directory: string,
  frame: FrameFile,
  picture: { pixels: Buffer; size: FrameSize; quality?: number },
): Promise<Buffer> {
  const { widthPx, heightPx } = picture.size;
  let image = sharp(picture.pixels, { raw: { width: widthPx, height: heightPx, channels: 3 } });
  if (frame.exif) image = image.withExif(exifTags(frame.exif));
  if (frame.orientation !== 1) image = image.withMetadata({ orientation: frame.orientation });
  const bytes = await image.jpeg({ quality: picture.quality ?? DEFAULT_QUALITY }).toBuffer();
  await writeFileWithTime(directory, frame, bytes);
  return bytes;
}

export async function writeFileWithTime(
  directory: string,
  frame: { file: string; modifiedMs: number },
  bytes: Buffer,
): Promise<void> {
  const target = path.join(directory, ...frame.file.split("/"));
  await mkdir(path.dirname(target), { recursive: true });
  await writeFile(target, bytes);
  await utimes(target, frame.modifiedMs / 1000, frame.modifiedMs / 1000);
}
