import type { FrameMeasurements, PairMeasure } from "@/lib/analysis/types";
import type { CaptureMetadata } from "@/lib/metadata/types";

export const SET_ASIDE_REASONS = ["soft", "moved", "exposure", "stray", "by hand"] as const;
export type SetAsideReason = (typeof SET_ASIDE_REASONS)[number];

export const QUESTION_KINDS = [
  "soft",
  "soft-stack",
  "moved",
  "exposure",
  "focal-length",
  "between-stacks",
  "stray",
  "duplicate",
  "few-frames",
  "hole",
  "thin-seam",
  "retake",
  "two-stacks",
  "order",
] as const;
export type QuestionKind = (typeof QUESTION_KINDS)[number];

/** One frame as the sorting sees it. */
export interface SortFrame {
  readonly id: string;
  /** File name without folder and extension. */
  readonly name: string;
  /** Folder relative to what was dropped, "/" between names; null at the root. */
  readonly folder: string | null;
  readonly lastModifiedMs: number | null;
  readonly metadata: CaptureMetadata;
  readonly measurements: FrameMeasurements;
}

/**
 * What is decided already and must not move: stacks from an earlier sorting or from a person.
 * Frames of one fixed stack stay together; placed stacks keep their places relative to each other
 * (a row or column found above or left of them renumbers all alike).
 */
export interface FixedStack {
  readonly id: string;
  readonly frameIds: readonly string[];
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number;
  readonly isChosenTake: boolean;
  /** A person placed or settled it: its row and column (or that it has none) are absolute and its frames final. */
  readonly byPerson: boolean;
  /** Chosen by a person: it stays the reference as long as it is in use. */
  readonly referenceId?: string | null;
}

export interface SortFacts {
  readonly stacks: readonly FixedStack[];
  /** Frames that a person left loose on purpose. */
  readonly looseFrameIds: readonly string[];
  /** Frames that a person put into their stack, or set aside there: what was shot beside them does not follow them. */
  readonly heldFrameIds?: readonly string[];
  /** Set aside or brought back by a person; null: in use whatever is measured. */
  readonly setAside: Readonly<Record<string, SetAsideReason | null>>;
  /** Keys of questions that a person has settled; they are not asked again. */
  readonly settledQuestionKeys: readonly string[];
  /** The grid is this large at the least: people may have added empty rows or columns. Left out: as the frames fill it. */
  readonly grid?: { readonly rows: number; readonly columns: number };
}

/** Settings a project may give; null: found by the computation. */
export interface SortOptions {
  /** Fraction of the tile's side. */
  readonly overlapWanted: number;
  readonly framesPerTile: { readonly least: number; readonly most: number };
  readonly longestPauseSeconds: number | null;
  readonly expectedRows: number | null;
  readonly expectedColumns: number | null;
  /** Log ratio to the stack's median under which a frame is soft; negative. */
  readonly softLimit: number;
}

/** Log ratio of the Laplacian variance to the stack's under which a frame is soft. Source: analysis.md, step 7. */
export const SOFT_LIMIT = -0.2;

export interface SortInput {
  readonly frames: readonly SortFrame[];
  readonly facts: SortFacts;
  readonly options: SortOptions;
}

/**
 * Measures two frames on demand; the sorting decides which pairs it needs. Must be symmetric up to sign.
 * "turned" asks to look for frames turned against each other as well, at several times the cost.
 */
export type MeasurePair = (aId: string, bId: string, effort?: "plain" | "turned") => Promise<PairMeasure>;

export interface SortProgress {
  readonly step: "order" | "stacks" | "grid" | "frames" | "done";
  readonly done: number;
  readonly total: number;
}

export interface ShotOrder {
  readonly along: "rows" | "columns";
  readonly from: "top-left" | "top-right" | "bottom-left" | "bottom-right";
  readonly turns: boolean;
}

export interface ProposedStack {
  /** The fixed stack's id, else derived from its frames' ids: same input, same id. */
  readonly id: string;
  readonly frameIds: readonly string[];
  /** 1 is the top; null: no place yet. Both or neither. */
  readonly row: number | null;
  readonly column: number | null;
  readonly take: number;
  readonly isChosenTake: boolean;
  /** Sharpest in use; null where none is in use. */
  readonly referenceId: string | null;
  /** Probability that its place is right, 0 to 1. */
  readonly confidence: number;
  /** One sentence: why it is here. */
  readonly reason: string;
  /** Position of its top left corner on the joined picture, full-size px; null where not registered. */
  readonly position: { readonly xPx: number; readonly yPx: number } | null;
  /** Where to look at 100 %: the most telling spot, fractions of width and height of the reference. */
  readonly spot: { readonly x: number; readonly y: number };
}

export interface ProposedFrame {
  readonly id: string;
  /** 0, 1, 2 ...: place in the order taken, over all frames. */
  readonly orderTaken: number;
  readonly stackId: string | null;
  readonly setAside: SetAsideReason | null;
  /** Against the best of its stack, 0 to 1; null: cannot tell. */
  readonly relativeSharpness: number | null;
  /** Where its top left corner lies in the reference's full-size pixels; null where not measured. */
  readonly shift: { readonly xPx: number; readonly yPx: number } | null;
  /** Seconds since the frame before in the order taken; null: unknown. */
  readonly pauseBeforeSeconds: number | null;
  /** Probability that its stack is right, 0 to 1. */
  readonly confidence: number;
  /** One sentence: why it is here. */
  readonly reason: string;
}

/** The shared edge of two neighbouring tiles' chosen takes. */
export interface ProposedSeam {
  readonly stackId: string;
  readonly neighbourId: string;
  /** Where the neighbour lies. */
  readonly side: "right" | "below";
  /** Fraction of the tile's side; null: could not be measured. */
  readonly overlap: number | null;
}

/** One possible answer of a question, as what it would do; commands are built from it. */
export type AnswerAction =
  | { readonly type: "keep" }
  | { readonly type: "move-frames"; readonly frameIds: readonly string[]; readonly toStackId: string | null }
  | { readonly type: "set-aside"; readonly frameIds: readonly string[]; readonly reason: SetAsideReason }
  | { readonly type: "bring-back"; readonly frameIds: readonly string[] }
  | { readonly type: "choose-take"; readonly stackId: string }
  | { readonly type: "merge-stacks"; readonly stackIds: readonly string[] }
  | { readonly type: "split-stack"; readonly stackId: string; readonly atFrameId: string }
  /** Together in a stack of their own, without a place. */
  | { readonly type: "new-stack"; readonly frameIds: readonly string[] }
  /** Out of the grid; they stay stacks. */
  | { readonly type: "take-out"; readonly stackIds: readonly string[] };

export interface ProposedQuestion {
  /** The same doubt has the same key in every sorting. */
  readonly key: string;
  readonly kind: QuestionKind;
  /** One sentence, a question where it can be: "Does HARB0019 belong to A4?"; a token stands for each tile, as in all texts. */
  readonly message: string;
  /** One sentence: what was measured. */
  readonly evidence: string;
  readonly frameIds: readonly string[];
  readonly stackIds: readonly string[];
  /** Token of the tile (`lib/board/name-tokens.ts`), or null. */
  readonly tile: string | null;
  /** First is the recommended one. Labels are plain verbs: "Move to A4", "Keep in A3". */
  readonly answers: readonly { readonly label: string; readonly action: AnswerAction }[];
  /** Higher is worse; the docket walks from the top. */
  readonly severity: number;
}

export interface Proposal {
  readonly engineVersion: string;
  readonly rows: number;
  readonly columns: number;
  readonly shotOrder: ShotOrder | null;
  readonly stacks: readonly ProposedStack[];
  /** Every input frame exactly once, in the order taken. */
  readonly frames: readonly ProposedFrame[];
  readonly seams: readonly ProposedSeam[];
  readonly questions: readonly ProposedQuestion[];
  /** The time limit that was used or found, seconds; null: pictures alone decided. */
  readonly longestPauseSeconds: number | null;
}

/** The signature of `lib/sorting/sort-frames.ts`. Pure: same input, same output, inputs never changed. */
export type SortFrames = (
  input: SortInput,
  measurePair: MeasurePair,
  onProgress?: (progress: SortProgress) => void,
) => Promise<Proposal>;
