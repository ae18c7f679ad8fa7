/** Extensions of cameras' raw files, lower case. */
const RAW_EXTENSIONS = new Set(
  "3fr arw cr2 cr3 crw dcr dng erf fff iiq kdc mef mos mrw nef nrw orf pef raf raw rw2 rwl sr2 srf srw x3f".split(" "),
);

export function isRawName(name: string): boolean {
  const dot = name.lastIndexOf(".");
  return dot >= 0 && RAW_EXTENSIONS.has(name.slice(dot + 1).toLowerCase());
}

/** Folder and stem, lower case: the raw file and the JPEG of one exposure have the same. */
export function pairingKey(folder: string | null, name: string): string {
  const dot = name.lastIndexOf(".");
  const stem = dot > 0 ? name.slice(0, dot) : name;
  return `${folder ?? ""}/${stem}`.toLowerCase();
}
