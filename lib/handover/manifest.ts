import { currentSeams } from "@/lib/board/current-seams";
import type { Board, BoardFrame, BoardStack } from "@/lib/board/model";
import { emptyTiles } from "@/lib/board/empty-tiles";
import { withPresentNames } from "@/lib/board/present-names";
import { tileName } from "@/lib/board/tile-name";
import { expectedNoise } from "@/lib/board/expected-noise";
import type { Manifest, ManifestFrame, ManifestStack } from "./manifest-types";
import { assertManifest } from "./validate-manifest";

export interface ManifestOptions {
  /** RFC 3339, UTC. */
  readonly createdAt: string;
  /** Left out for a project that has no identity beyond its folder. */
  readonly hasProjectId: boolean;
  /** Only this member's stacks and frames; null: what nobody merges yet; left out: everything. */
  readonly share?: { readonly userId: string | null };
  /** What to call a member who merges a stack. Without it their id is written. */
  readonly nameOfMember?: (userId: string) => string;
}

/** How stacks are merged as long as nobody chooses another way. */
const MERGE = "mean";
/** Digits kept, so that the file says no more than was measured. */
const SHARE_DIGITS = 4;
const PIXEL_DIGITS = 2;
const VARIANCE_DIGITS = 6;

/**
 * The manifest of a board: the stack and position of every frame.
 * @returns a manifest that the schema accepts
 * @throws Error naming the first fault, should the schema refuse it
 */
export function buildManifest(board: Board, options: ManifestOptions): Manifest {
  const { share } = options;
  const stacks = share ? board.stacks.filter((stack) => stack.shareUserId === share.userId) : board.stacks;
  const isIn = new Set(stacks.map((stack) => stack.id));
  const frames = share ? board.frames.filter((frame) => frame.stackId && isIn.has(frame.stackId)) : board.frames;
  const frameIds = new Set(frames.map((frame) => frame.id));
  const questions = withPresentNames(board).questions.filter((question) => {
    if (!share) return true;
    return question.stackIds.some((id) => isIn.has(id)) || question.frameIds.some((id) => frameIds.has(id));
  });
  const manifest: Manifest = {
    manifest: "stackyard/1",
    createdAt: options.createdAt,
    project: options.hasProjectId
      ? { id: board.projectId, name: board.projectName, revision: board.revision }
      : { name: board.projectName },
    grid: {
      rows: board.grid.rows,
      columns: board.grid.columns,
      shotOrder: board.grid.shotOrder,
      overlapWanted: board.grid.overlapWanted,
      holes: emptyTiles(board.grid, board.stacks),
      framesPerTile: board.grid.framesPerTile,
    },
    stacks: writeStacks(board, stacks, options),
    frames: writeFrames(board, frames),
    toSettle: questions.map(({ kind, message, frameIds: ids, stackIds, tile }) => {
      return { kind, message, frames: [...ids], stacks: [...stackIds], tile };
    }),
    unreadable: board.unreadable.map(({ sha256, ...file }) => (sha256 === null ? file : { ...file, sha256 })),
    duplicates: board.duplicates.map(({ name, folder, of }) => ({ name, folder, of })),
  };
  assertManifest(manifest);
  return manifest;
}

function tileOf(stack: BoardStack | undefined): string | null {
  return stack?.row && stack.column ? tileName(stack.row, stack.column) : null;
}

function isInUse(frame: BoardFrame): boolean {
  return frame.stackId !== null && frame.setAside === null;
}

function writeStacks(board: Board, stacks: readonly BoardStack[], options: ManifestOptions): ManifestStack[] {
  const framesOf = groupFrames(board.frames);
  const overlaps = overlapsOf(board);
  return stacks.map((stack): ManifestStack => {
    const frames = framesOf.get(stack.id) ?? [];
    const inUse = frames.filter(isInUse).length;
    const share = stack.shareUserId;
    return {
      id: stack.id,
      tile: tileOf(stack),
      row: stack.row,
      column: stack.column,
      take: stack.take,
      chosenTake: stack.isChosenTake,
      frames: frames.length,
      inUse,
      reference: stack.referenceId,
      merge: MERGE,
      ...(inUse > 0 ? { noise: round(expectedNoise(inUse, MERGE), SHARE_DIGITS) } : {}),
      share: share === null ? null : (options.nameOfMember?.(share) ?? share),
      settled: stack.isSettled,
      overlap: overlaps.get(stack.id) ?? NO_OVERLAP,
    };
  });
}

const NO_OVERLAP: ManifestStack["overlap"] = { left: null, right: null, above: null, below: null };

function overlapsOf(board: Board): Map<string, ManifestStack["overlap"]> {
  const overlaps = new Map<string, ManifestStack["overlap"]>();
  const set = (id: string, side: keyof ManifestStack["overlap"], value: number | null): void => {
    overlaps.set(id, {
      ...(overlaps.get(id) ?? NO_OVERLAP),
      [side]: value === null ? null : round(value, SHARE_DIGITS),
    });
  };
  for (const seam of currentSeams(board)) {
    set(seam.stackId, seam.side, seam.overlap);
    set(seam.neighbourId, seam.side === "right" ? "left" : "above", seam.overlap);
  }
  return overlaps;
}

function groupFrames(frames: readonly BoardFrame[]): Map<string, BoardFrame[]> {
  const groups = new Map<string, BoardFrame[]>();
  for (const frame of frames) {
    if (frame.stackId === null) continue;
    const group = groups.get(frame.stackId);
    if (group) group.push(frame);
    else groups.set(frame.stackId, [frame]);
  }
  return groups;
}

function writeFrames(board: Board, frames: readonly BoardFrame[]): ManifestFrame[] {
  const stacks = new Map(board.stacks.map((stack) => [stack.id, stack]));
  const places = new Map<string, { order: number; layer: number | null }>();
  for (const group of groupFrames(board.frames).values()) {
    let layer = 0;
    const sorted = [...group].sort((a, b) => a.orderTaken - b.orderTaken);
    sorted.forEach((frame, at) => places.set(frame.id, { order: at + 1, layer: isInUse(frame) ? ++layer : null }));
  }
  return frames.map((frame): ManifestFrame => {
    const stack = frame.stackId === null ? undefined : stacks.get(frame.stackId);
    const place = places.get(frame.id);
    return {
      ...whatWasTaken(frame),
      stack: frame.stackId,
      tile: tileOf(stack),
      row: stack?.row ?? null,
      column: stack?.column ?? null,
      take: stack?.take ?? null,
      order: place?.order ?? null,
      // Equal weights by hand: the k-th layer from the bottom at 100/k per cent. Source: common practice.
      layerOpacity: place?.layer ? round(100 / place.layer, PIXEL_DIGITS) : null,
      inUse: isInUse(frame),
      setAside: frame.setAside,
      sharpness: {
        laplacianVariance: round(frame.laplacianVariance, VARIANCE_DIGITS),
        relative: frame.relativeSharpness === null ? null : round(frame.relativeSharpness, SHARE_DIGITS),
      },
      shift: frame.shift && { x: round(frame.shift.xPx, PIXEL_DIGITS), y: round(frame.shift.yPx, PIXEL_DIGITS) },
      placedBy: frame.placedBy,
    };
  });
}

type Taken = Pick<ManifestFrame, "id" | "files" | "takenAt" | "camera" | "exposure" | "width" | "height">;

function whatWasTaken({ id, files, metadata, widthPx, heightPx }: BoardFrame): Taken {
  const { takenAt, make, model, serial, lens } = metadata;
  return {
    id,
    files: files.map(({ name, folder, bytes, sha256, mediaType }) => ({
      name,
      folder,
      bytes,
      sha256,
      type: mediaType,
    })),
    takenAt: takenAt && { local: takenAt.local, offset: formatOffset(takenAt.offsetMinutes) },
    camera: { make, model, serial, lens },
    exposure: {
      seconds: metadata.exposureSeconds,
      aperture: metadata.aperture,
      iso: metadata.iso,
      focalLength: metadata.focalLengthMm,
    },
    width: widthPx,
    height: heightPx,
  };
}

function formatOffset(minutes: number | null): string | null {
  if (minutes === null) return null;
  const whole = Math.abs(minutes);
  const two = (value: number): string => String(value).padStart(2, "0");
  return `${minutes < 0 ? "-" : "+"}${two(Math.floor(whole / 60))}:${two(whole % 60)}`;
}

function round(value: number, digits: number): number {
  return Number(value.toFixed(digits)) + 0;
}
