import type { CaptureMetadata } from "@/lib/metadata/types";
import type { AnswerAction, QuestionKind, SetAsideReason, ShotOrder } from "@/lib/sorting/types";

/**
 * A project's board as plain data: what `/api/projects/{id}/board` answers, what the manifest is made
 * from (on the web and in `npm run sort` alike), and what commands will be applied to.
 */
export interface Board {
  readonly projectId: string;
  readonly projectName: string;
  readonly revision: number;
  readonly grid: BoardGrid;
  readonly stacks: readonly BoardStack[];
  /** In the order taken. */
  readonly frames: readonly BoardFrame[];
  readonly seams: readonly BoardSeam[];
  /** Worst first. */
  readonly questions: readonly BoardQuestion[];
  readonly unreadable: readonly UnreadableFile[];
  readonly duplicates: readonly DuplicateFile[];
}

export interface BoardGrid {
  readonly rows: number;
  readonly columns: number;
  readonly shotOrder: ShotOrder | null;
  readonly overlapWanted: number;
  readonly framesPerTile: { readonly least: number; readonly most: number };
  /** The time limit between stacks, seconds; null: pictures alone decided. */
  readonly longestPauseSeconds: number | null;
}

export interface BoardStack {
  readonly id: string;
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number;
  readonly isChosenTake: boolean;
  readonly referenceId: string | null;
  readonly isSettled: boolean;
  /** Member who merges it; null: nobody yet. */
  readonly shareUserId: string | null;
  readonly confidence: number;
  readonly reason: string;
  readonly position: { readonly xPx: number; readonly yPx: number } | null;
  readonly spot: { readonly x: number; readonly y: number };
  readonly placedBy: "computation" | "person";
}

export interface FrameFile {
  readonly id: string;
  readonly name: string;
  readonly folder: string | null;
  readonly bytes: number;
  readonly sha256: string;
  readonly mediaType: string;
}

export interface BoardFrame {
  readonly id: string;
  /** File name of the first file, without its extension. */
  readonly name: string;
  /** The first is the one that was measured. */
  readonly files: readonly FrameFile[];
  readonly metadata: CaptureMetadata;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly orderTaken: number;
  readonly stackId: string | null;
  readonly setAside: SetAsideReason | null;
  readonly laplacianVariance: number;
  readonly meanBrightness: number;
  readonly relativeSharpness: number | null;
  readonly shift: { readonly xPx: number; readonly yPx: number } | null;
  readonly pauseBeforeSeconds: number | null;
  readonly confidence: number;
  readonly reason: string;
  readonly placedBy: "computation" | "person";
}

/**
 * What was measured between two stacks when they lay beside each other. Moved since, they may not: `currentSeams` gives
 * the seams that count now.
 */
export interface BoardSeam {
  readonly stackId: string;
  readonly neighbourId: string;
  readonly side: "right" | "below";
  /** Fraction of the tile's side; null: could not be measured. */
  readonly overlap: number | null;
}

export interface BoardQuestion {
  readonly id: string;
  readonly key: string;
  readonly kind: QuestionKind;
  /** As in all that a sorting says, tokens stand for names: `withPresentNames` puts those of now in their place. */
  readonly message: string;
  readonly evidence: string;
  readonly frameIds: readonly string[];
  readonly stackIds: readonly string[];
  readonly tile: string | null;
  readonly answers: readonly { readonly label: string; readonly action: AnswerAction }[];
  readonly severity: number;
}

export interface UnreadableFile {
  readonly name: string;
  readonly folder: string | null;
  readonly bytes: number;
  readonly sha256: string | null;
  readonly reason: string;
}

export interface DuplicateFile {
  readonly name: string;
  readonly folder: string | null;
  /** Id of the frame that has the same bytes. */
  readonly of: string;
}
