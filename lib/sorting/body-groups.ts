import { fileNumber } from "./file-number";
import type { SortFrame } from "./types";

/**
 * Frames by the camera that took them: serial number, else make, model and file prefix. Frames that say less
 * (no serial, no EXIF) join the one body whose prefix they share; of several, the one with the nearest counter.
 */
export function groupByBody(frames: readonly SortFrame[]): SortFrame[][] {
  const sorted = [...frames].sort((a, b) => (a.id < b.id ? -1 : 1));
  const groups = new Map<string, SortFrame[]>();
  const weaker: SortFrame[][] = [[], []];
  for (const frame of sorted) {
    const level = strength(frame);
    if (level === 2) add(groups, `serial ${cameraOf(frame)} ${frame.metadata.serial ?? ""}`, frame);
    else weaker[1 - level]?.push(frame);
  }
  for (const level of weaker) joinLevel(groups, level);
  return [...groups.values()];
}

/** 2: says its serial number, 1: make or model, 0: nothing. */
function strength(frame: SortFrame): 0 | 1 | 2 {
  const { serial, make, model } = frame.metadata;
  if (serial !== null) return 2;
  return make !== null || model !== null ? 1 : 0;
}

function joinLevel(groups: Map<string, SortFrame[]>, frames: readonly SortFrame[]): void {
  const known = [...groups.entries()];
  const prefixes = new Set(frames.map(prefixOf));
  // Names that are checksums have a prefix each; a body for each would be nonsense.
  const arePrefixesUseful = prefixes.size <= 2 || prefixes.size * 4 <= frames.length;
  for (const frame of frames) {
    const host = nearestGroup(known, frame);
    const own = arePrefixesUseful ? prefixOf(frame) : "";
    add(groups, host ?? `prefix ${cameraOf(frame)} ${own}`, frame);
  }
}

function nearestGroup(groups: readonly (readonly [string, readonly SortFrame[]])[], frame: SortFrame): string | null {
  const number = fileNumber(frame.name);
  let best: { key: string; distance: number } | null = null;
  for (const [key, members] of groups) {
    let distance = Infinity;
    for (const member of members) {
      const other = fileNumber(member.name);
      const isAlike = strength(frame) === 0 || cameraOf(member) === cameraOf(frame);
      if (!number || !other || other.prefix !== number.prefix || !isAlike) continue;
      const folders = member.folder === frame.folder ? 0 : number.period;
      distance = Math.min(distance, Math.abs(other.number - number.number) + folders);
    }
    if (distance < Infinity && (!best || distance < best.distance)) best = { key, distance };
  }
  return best?.key ?? null;
}

function cameraOf(frame: SortFrame): string {
  return `${frame.metadata.make ?? ""} ${frame.metadata.model ?? ""}`;
}

function prefixOf(frame: SortFrame): string {
  return fileNumber(frame.name)?.prefix ?? "";
}

function add(groups: Map<string, SortFrame[]>, key: string, frame: SortFrame): void {
  const members = groups.get(key);
  if (members) members.push(frame);
  else groups.set(key, [frame]);
}
