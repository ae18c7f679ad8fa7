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
  const known = indexByPrefix(groups);
  const prefixes = new Set(frames.map(prefixOf));
  // Names that are checksums have a prefix each; a body for each would be nonsense.
  const arePrefixesUseful = prefixes.size <= 2 || prefixes.size * 4 <= frames.length;
  for (const frame of frames) {
    const host = nearestGroup(known, frame);
    const own = arePrefixesUseful ? prefixOf(frame) : "";
    add(groups, host ?? `prefix ${cameraOf(frame)} ${own}`, frame);
  }
}

/** What a body's files with one prefix are numbered like. */
interface NumberedGroup {
  readonly key: string;
  readonly camera: string;
  readonly folder: string | null;
  /** Ascending. */
  readonly numbers: number[];
}

function indexByPrefix(groups: ReadonlyMap<string, readonly SortFrame[]>): Map<string, NumberedGroup[]> {
  const index = new Map<string, NumberedGroup[]>();
  const parts = new Map<string, NumberedGroup>();
  for (const [key, members] of groups) {
    for (const member of members) {
      const number = fileNumber(member.name);
      if (!number) continue;
      const camera = cameraOf(member);
      const partKey = JSON.stringify([key, number.prefix, member.folder, camera]);
      const known = parts.get(partKey);
      if (known) known.numbers.push(number.number);
      else {
        const part = { key, camera, folder: member.folder, numbers: [number.number] };
        parts.set(partKey, part);
        index.set(number.prefix, [...(index.get(number.prefix) ?? []), part]);
      }
    }
  }
  for (const part of parts.values()) part.numbers.sort((a, b) => a - b);
  return index;
}

function nearestGroup(groups: ReadonlyMap<string, readonly NumberedGroup[]>, frame: SortFrame): string | null {
  const number = fileNumber(frame.name);
  if (!number) return null;
  let best: { key: string; distance: number } | null = null;
  for (const part of groups.get(number.prefix) ?? []) {
    if (strength(frame) !== 0 && part.camera !== cameraOf(frame)) continue;
    const apart = part.folder === frame.folder ? 0 : number.period;
    const distance = distanceTo(part.numbers, number.number) + apart;
    if (!best || distance < best.distance) best = { key: part.key, distance };
  }
  return best?.key ?? null;
}

/** Distance of a number to the nearest of a sorted list. */
function distanceTo(sorted: readonly number[], value: number): number {
  let [low, high] = [0, sorted.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((sorted[middle] ?? 0) < value) low = middle + 1;
    else high = middle;
  }
  return Math.min(Math.abs((sorted[low] ?? Infinity) - value), Math.abs((sorted[low - 1] ?? Infinity) - value));
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
