import path from "node:path";

import type { SourceFrame } from "@/lib/board/from-proposal";
import type { DuplicateFile, FrameFile, UnreadableFile } from "@/lib/board/model";
import { pairFiles } from "@/lib/frames/pairing";
import type { AnalysedPicture } from "@/lib/imaging/analyse-picture";
import { createAnalysisPool } from "@/lib/imaging/analysis-pool";
import { PictureError, REASONS } from "@/lib/imaging/picture-error";
import { hasRawExtension, stemOf } from "@/lib/intake/picture-files";
import type { FoundFile } from "./collect-files";

export interface AnalysedFrame extends SourceFrame {
  readonly lastModifiedMs: number;
  /** Its registration image. */
  readonly registrationPath: string;
}

export interface AnalysedFiles {
  /** In the order of the files. */
  readonly frames: readonly AnalysedFrame[];
  readonly unreadable: readonly UnreadableFile[];
  readonly duplicates: readonly DuplicateFile[];
}

interface ReadFile extends FoundFile {
  readonly picture: AnalysedPicture;
  readonly registrationPath: string;
}

/** Digits of the SHA-256 that make an identifier: 96 bits, so that no two of a shoot are ever alike. */
const ID_DIGITS = 24;

/** A frame's identifier, from what its first file holds. */
export function frameIdOf(sha256: string): string {
  return `frame-${sha256.slice(0, ID_DIGITS)}`;
}

/**
 * Reads every file once: hash, metadata, measurements and registration image.
 * @param registrationFolder - where the registration images go
 */
export async function analyseFiles(
  files: readonly FoundFile[],
  { jobs, registrationFolder, onRead }: { jobs: number; registrationFolder: string; onRead: (done: number) => void },
): Promise<AnalysedFiles> {
  const pool = createAnalysisPool({ size: jobs });
  const unreadable = new Map<FoundFile, UnreadableFile>();
  const read = new Map<FoundFile, ReadFile>();
  let done = 0;
  try {
    await Promise.all(
      files.map(async (file, at) => {
        const registrationPath = path.join(registrationFolder, `${at}.reg`);
        try {
          const outputs = { previewPath: null, thumbnailPath: null, registrationPath };
          const picture = await pool.analyse({ path: file.path, name: file.name, ...outputs });
          read.set(file, { ...file, picture, registrationPath });
        } catch (error) {
          unreadable.set(file, toUnreadable(file, error));
        }
        onRead(++done);
      }),
    );
  } finally {
    await pool.close();
  }
  return makeFrames(
    files.flatMap((file) => read.get(file) ?? []),
    files.flatMap((file) => unreadable.get(file) ?? []),
  );
}

function toUnreadable(file: FoundFile, error: unknown): UnreadableFile {
  const { name, folder } = file;
  if (error instanceof PictureError) {
    return { name, folder, bytes: error.file?.bytes ?? 0, sha256: error.file?.sha256 ?? null, reason: error.reason };
  }
  const message = error instanceof Error ? error.message : String(error);
  return { name, folder, bytes: 0, sha256: null, reason: `The file could not be read: ${message}` };
}

function makeFrames(files: readonly ReadFile[], unreadable: UnreadableFile[]): AnalysedFiles {
  const firstWith = new Map<string, ReadFile>();
  const repeats: { file: ReadFile; of: ReadFile }[] = [];
  const distinct = files.filter((file) => {
    const first = firstWith.get(file.picture.sha256);
    if (first) repeats.push({ file, of: first });
    else firstWith.set(file.picture.sha256, file);
    return !first;
  });
  const frames: AnalysedFrame[] = [];
  const frameOf = new Map<ReadFile, string>();
  for (const { files: own } of pairFiles(distinct)) {
    const first = own[0];
    const measurements = first?.picture.measurements;
    if (!first || !measurements) {
      unreadable.push(...own.map(rawAlone));
      continue;
    }
    const id = frameIdOf(first.picture.sha256);
    for (const file of own) frameOf.set(file, id);
    frames.push({
      id,
      name: stemOf(first.name),
      files: own.map(toFrameFile),
      metadata: first.picture.metadata,
      measurements,
      lastModifiedMs: first.lastModifiedMs,
      registrationPath: first.registrationPath,
    });
  }
  const duplicates = repeats.flatMap(({ file: { name, folder }, of }) => {
    const id = frameOf.get(of);
    return id ? [{ name, folder, of: id }] : [];
  });
  return { frames, unreadable, duplicates };
}

function rawAlone({ name, folder, picture }: ReadFile): UnreadableFile {
  const reason = hasRawExtension(name) ? REASONS.rawAlone : REASONS.damaged;
  return { name, folder, bytes: picture.bytes, sha256: picture.sha256, reason };
}

function toFrameFile({ name, folder, picture }: ReadFile): FrameFile {
  const { bytes, sha256, mediaType } = picture;
  return { id: `file-${sha256.slice(0, ID_DIGITS)}`, name, folder, bytes, sha256, mediaType };
}
