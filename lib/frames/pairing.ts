import { hasRawExtension, stemOf } from "@/lib/intake/picture-files";

export interface PairableFile {
  readonly name: string;
  /** Folder relative to what was dropped, "/" between names; null at the root. */
  readonly folder: string | null;
}

/** The files of one exposure. The first is the one that is measured: a picture that can be decoded, if there is one. */
export interface PairedFrame<File extends PairableFile> {
  readonly files: readonly File[];
}

/**
 * Puts files together that are one exposure: raw files belong to the decodable file of the same folder and stem
 * (DCF: one object in several files). Two decodable files of one stem are two frames; the raw files go to the first.
 * @param files - in any order
 * @returns frames in the order of their first file; raw files without a decodable one are frames of their own
 * Edges: upper and lower case are one; folders are compared likewise; the same name twice is two frames.
 * Source: DCF (CIPA DC-009): files of one name and number with different extensions are one object.
 */
export function pairFiles<File extends PairableFile>(files: readonly File[]): PairedFrame<File>[] {
  const frames = new Map<File, File[]>();
  const firstByKey = new Map<string, File>();
  for (const file of files) {
    if (hasRawExtension(file.name)) continue;
    frames.set(file, [file]);
    const key = frameKey(file);
    if (!firstByKey.has(key)) firstByKey.set(key, file);
  }
  for (const file of files) {
    if (!hasRawExtension(file.name)) continue;
    const key = frameKey(file);
    const first = firstByKey.get(key);
    if (first === undefined) {
      frames.set(file, [file]);
      firstByKey.set(key, file);
    } else {
      frames.get(first)?.push(file);
    }
  }
  return files.flatMap((file) => {
    const own = frames.get(file);
    return own ? [{ files: own }] : [];
  });
}

/** Equal for files that are one exposure: folder and stem, in one case and one Unicode form. */
export function frameKey(file: PairableFile): string {
  return `${file.folder ?? ""}/${stemOf(file.name)}`.normalize("NFC").toLowerCase();
}
