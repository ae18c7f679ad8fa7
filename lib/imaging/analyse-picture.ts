import { createHash, randomUUID } from "node:crypto";
import { createReadStream } from "node:fs";
import { mkdir, open, readFile, rename, rm, writeFile } from "node:fs/promises";
import { basename, dirname } from "node:path";

import { measureFrame } from "@/lib/analysis/measure-frame";
import type { FrameMeasurements } from "@/lib/analysis/types";
import { decodeGreen, readHeader } from "@/lib/imaging/decode";
import { PictureError, REASONS } from "@/lib/imaging/picture-error";
import { makePreviews } from "@/lib/imaging/previews";
import { encodeRegistration } from "@/lib/imaging/registration-file";
import { HEAD_BYTES, identifyPicture, type PictureIdentity } from "@/lib/intake/picture-files";
import { readMetadata, readOrientation } from "@/lib/metadata/read-metadata";
import type { CaptureMetadata } from "@/lib/metadata/types";

/** Where the pictures that are made go; null: not made. */
export interface PictureOutputs {
  readonly previewPath: string | null;
  readonly thumbnailPath: string | null;
  readonly registrationPath: string | null;
}

export interface PictureTask extends PictureOutputs {
  readonly path: string;
  /** The file's own name, where it is stored under another; raw files are told from TIFF by it. */
  readonly name?: string;
}

export interface AnalysedPicture {
  /** Lower-case hexadecimal. */
  readonly sha256: string;
  readonly bytes: number;
  readonly mediaType: string;
  readonly metadata: CaptureMetadata;
  /** Null for a raw file, which is not decoded. */
  readonly measurements: FrameMeasurements | null;
}

/** A file is read whole to be decoded; uncompressed 16-bit colour at MAX_PIXELS would have this size. Bytes. */
const MAX_DECODED_FILE_BYTES = 1_500_000_000;
/** Metadata of raw files stands at their beginning. Bytes. */
const RAW_METADATA_BYTES = 4 * 1024 * 1024;

/**
 * The one pass over a file: hash, metadata, measurements, preview, thumbnail and registration image.
 * Safe to repeat: the files it makes appear whole or not at all, and replace earlier ones.
 * @throws PictureError, with hash and size, where the file is no picture that can be read
 * @throws Error of the file system where it cannot be read or written
 */
export async function analysePicture(task: PictureTask): Promise<AnalysedPicture> {
  const { head, bytes } = await readHead(task.path);
  const identity = identifyPicture(task.name ?? basename(task.path), head);
  if (identity.kind !== "decodable" || bytes > MAX_DECODED_FILE_BYTES) return hashOnly(task.path, bytes, identity);
  const file = await readFile(task.path);
  const sha256 = createHash("sha256").update(file).digest("hex");
  try {
    const analysed = await analyseDecodable(file, task);
    return { sha256, bytes: file.length, mediaType: identity.mediaType, ...analysed };
  } catch (error) {
    if (!(error instanceof PictureError)) throw error;
    throw new PictureError(error.code, error.reason, { sha256, bytes: file.length }, { cause: error.cause });
  }
}

async function analyseDecodable(
  file: Buffer,
  task: PictureTask,
): Promise<Pick<AnalysedPicture, "metadata" | "measurements">> {
  const header = await readHeader(file);
  // One reader's word on the orientation for measurements, previews and crops alike, or they would disagree.
  const metadata = {
    ...(await readMetadata(file, header.exif ?? null)),
    orientation: readOrientation(header.orientation),
  };
  const { plane, white } = await decodeGreen(file, header);
  const { measurements, registration } = measureFrame(plane, white, metadata.orientation);
  if (task.previewPath !== null || task.thumbnailPath !== null) {
    const { preview, thumbnail } = await makePreviews(file);
    await writeWhole(task.previewPath, preview);
    await writeWhole(task.thumbnailPath, thumbnail);
  }
  await writeWhole(task.registrationPath, encodeRegistration(registration));
  return { metadata, measurements };
}

async function readHead(path: string): Promise<{ head: Uint8Array; bytes: number }> {
  const handle = await open(path);
  try {
    const { size } = await handle.stat();
    const { buffer, bytesRead } = await handle.read(new Uint8Array(HEAD_BYTES), 0, HEAD_BYTES, 0);
    return { head: buffer.subarray(0, bytesRead), bytes: size };
  } finally {
    await handle.close();
  }
}

/** Raw files are hashed and asked for their metadata; what cannot be read is hashed and refused. */
async function hashOnly(path: string, bytes: number, identity: PictureIdentity): Promise<AnalysedPicture> {
  const hash = createHash("sha256");
  const beginning: Buffer[] = [];
  let held = 0;
  for await (const chunk of createReadStream(path)) {
    if (!(chunk instanceof Buffer)) continue;
    hash.update(chunk);
    if (held < RAW_METADATA_BYTES) beginning.push(chunk);
    held += chunk.length;
  }
  const sha256 = hash.digest("hex");
  if (bytes > 0 && identity.kind === "raw") {
    const metadata = await readMetadata(Buffer.concat(beginning));
    return { sha256, bytes, mediaType: identity.mediaType, metadata, measurements: null };
  }
  throw refusal(identity, { sha256, bytes });
}

function refusal(identity: PictureIdentity, file: { sha256: string; bytes: number }): PictureError {
  if (file.bytes === 0) return new PictureError("empty", REASONS.empty, file);
  if (identity.kind === "unsupported") {
    return new PictureError("unsupported", REASONS.unsupported(identity.format), file);
  }
  if (identity.kind === "decodable") {
    const megabytes = Math.round(file.bytes / 1e6);
    return new PictureError("too-large", REASONS.tooManyBytes(megabytes, MAX_DECODED_FILE_BYTES / 1e6), file);
  }
  const reason = identity.kind === "misnamed" ? REASONS.misnamed : REASONS.notAPicture;
  return new PictureError("not-a-picture", reason, file);
}

/** Writes beside the target and renames: a reader never sees half a file. */
async function writeWhole(path: string | null, content: Buffer): Promise<void> {
  if (path === null) return;
  const partial = `${path}.${randomUUID()}.part`;
  await mkdir(dirname(path), { recursive: true });
  try {
    await writeFile(partial, content);
    await rename(partial, path);
  } catch (error) {
    await rm(partial, { force: true });
    throw error;
  }
}
