import type { QuestionKind, SetAsideReason, ShotOrder } from "@/lib/sorting/types";

/** The manifest, version 1: `public/manifest.schema.json` says what each property means. */
export interface Manifest {
  readonly manifest: "stackyard/1";
  readonly createdAt: string;
  readonly project: { readonly id?: string; readonly name: string; readonly revision?: number };
  readonly grid: ManifestGrid;
  readonly stacks: readonly ManifestStack[];
  readonly frames: readonly ManifestFrame[];
  readonly toSettle: readonly ManifestQuestion[];
  readonly unreadable: readonly ManifestUnreadable[];
  readonly duplicates: readonly { readonly name: string; readonly folder: string | null; readonly of: string }[];
}

export interface ManifestGrid {
  readonly rows: number;
  readonly columns: number;
  readonly shotOrder: ShotOrder | null;
  readonly overlapWanted: number;
  readonly holes: readonly string[];
  readonly framesPerTile: { readonly least: number; readonly most: number };
}

export interface ManifestStack {
  readonly id: string;
  readonly tile: string | null;
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number;
  readonly chosenTake: boolean;
  readonly frames: number;
  readonly inUse: number;
  readonly reference: string | null;
  readonly merge: "mean" | "median";
  readonly noise?: number;
  readonly share: string | null;
  readonly settled: boolean;
  readonly overlap: Readonly<Record<"left" | "right" | "above" | "below", number | null>>;
}

export interface ManifestFile {
  readonly name: string;
  readonly folder: string | null;
  readonly bytes: number;
  readonly sha256: string;
  readonly type: string;
}

export interface ManifestFrame {
  readonly id: string;
  readonly files: readonly ManifestFile[];
  readonly takenAt: { readonly local: string; readonly offset: string | null } | null;
  readonly camera: Readonly<Record<"make" | "model" | "serial" | "lens", string | null>>;
  readonly exposure: Readonly<Record<"seconds" | "aperture" | "iso" | "focalLength", number | null>>;
  readonly width: number;
  readonly height: number;
  readonly stack: string | null;
  readonly tile: string | null;
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number | null;
  readonly order: number | null;
  readonly layerOpacity: number | null;
  readonly inUse: boolean;
  readonly setAside: SetAsideReason | null;
  readonly sharpness: { readonly laplacianVariance: number; readonly relative: number | null };
  readonly shift: { readonly x: number; readonly y: number } | null;
  readonly placedBy: "computation" | "person";
}

export interface ManifestQuestion {
  readonly kind: QuestionKind;
  readonly message: string;
  readonly frames: readonly string[];
  readonly stacks: readonly string[];
  readonly tile: string | null;
}

export interface ManifestUnreadable {
  readonly name: string;
  readonly folder: string | null;
  readonly bytes: number;
  readonly sha256?: string;
  readonly reason: string;
}
