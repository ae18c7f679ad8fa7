import type { IntakeList } from "@/lib/frames/schema";
import { HEAD_BYTES, hasPictureExtension, isHiddenName, isPictureFile } from "@/lib/intake/picture-files";
import type { OutgoingFile } from "@/lib/uploads/upload-queue";

/** A file that was chosen or dropped and is not sent, and why. */
export interface NotTaken {
  readonly name: string;
  readonly folder: string;
  readonly reason: string;
}

export interface ChosenFiles {
  readonly outgoing: readonly OutgoingFile[];
  readonly notTaken: readonly NotTaken[];
  /** In already, by name, folder, size and time of the last change: not sent twice. */
  readonly alreadyIn: number;
}

/**
 * Sorts what was dropped into what is sent, what is no picture, and what is in already; an upload of the same file
 * that broke off goes on where it stood.
 */
export async function sortChosenFiles(files: readonly File[], known: IntakeList): Promise<ChosenFiles> {
  const inAlready = new Set(
    known.files.map((file) => keyOf(file.name, file.folder ?? "", file.bytes, file.lastModifiedMs)),
  );
  const unfinished = new Map(
    known.uploads
      .filter((upload) => upload.isMine)
      .map((upload) => [keyOf(upload.name, upload.folder ?? "", upload.bytes, upload.lastModifiedMs), upload.url]),
  );
  const outgoing: OutgoingFile[] = [];
  const notTaken: NotTaken[] = [];
  let alreadyIn = 0;
  for (const file of files) {
    const folder = folderOf(file);
    const reason = await refusal(file);
    if (reason !== null) {
      notTaken.push({ name: file.name, folder, reason });
      continue;
    }
    const key = keyOf(file.name, folder, file.size, file.lastModified);
    if (inAlready.has(key)) {
      alreadyIn += 1;
      continue;
    }
    outgoing.push({
      name: file.name,
      folder,
      lastModifiedMs: file.lastModified,
      bytes: file.size,
      content: file,
      uploadUrl: unfinished.get(key) ?? null,
    });
  }
  return { outgoing: outgoing.sort(byPlace), notTaken, alreadyIn };
}

const collator = new Intl.Collator("en", { numeric: true });

/** Browsers give a folder's files in any order; sent in the camera's, they can be followed. */
function byPlace(a: OutgoingFile, b: OutgoingFile): number {
  return collator.compare(a.folder, b.folder) || collator.compare(a.name, b.name);
}

/** Folder of a chosen file, "/"-separated, relative to what was dropped; "" at the root. */
export function folderOf(file: File): string {
  const dropped = "relativePath" in file && typeof file.relativePath === "string" ? file.relativePath : "";
  const path = file.webkitRelativePath || dropped;
  const parts = path.split("/").filter((part) => part !== "" && part !== ".");
  return parts.slice(0, -1).join("/");
}

async function refusal(file: File): Promise<string | null> {
  if (isHiddenName(file.name)) return "hidden file";
  if (hasPictureExtension(file.name)) return null;
  const head = new Uint8Array(
    await file
      .slice(0, HEAD_BYTES)
      .arrayBuffer()
      .catch(() => new ArrayBuffer(0)),
  );
  return isPictureFile(file.name, head) ? null : "not a picture";
}

/** Uncompressed files of one camera are all of one size: without the time two shoots could be taken for one another. */
export function keyOf(name: string, folder: string, bytes: number, lastModifiedMs: number | null): string {
  return JSON.stringify([name, folder, bytes, lastModifiedMs]);
}
