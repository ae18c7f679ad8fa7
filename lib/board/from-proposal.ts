import type { FrameMeasurements } from "@/lib/analysis/types";
import type {
  Board,
  BoardFrame,
  BoardQuestion,
  BoardStack,
  DuplicateFile,
  FrameFile,
  UnreadableFile,
} from "@/lib/board/model";
import type { CaptureMetadata } from "@/lib/metadata/types";
import type { Proposal, ProposedFrame, SortOptions } from "@/lib/sorting/types";

/** A frame with its files, as it went into the sorting. */
export interface SourceFrame {
  readonly id: string;
  /** File name of the first file, without its extension. */
  readonly name: string;
  /** The first is the one that was measured. */
  readonly files: readonly FrameFile[];
  readonly metadata: CaptureMetadata;
  readonly measurements: FrameMeasurements;
}

export interface BoardSource {
  readonly projectId: string;
  readonly projectName: string;
  readonly revision: number;
  readonly options: SortOptions;
  readonly frames: readonly SourceFrame[];
  readonly unreadable: readonly UnreadableFile[];
  readonly duplicates: readonly DuplicateFile[];
}

/**
 * The board that a proposal makes on its own, before any person has changed it.
 * @throws RangeError when the proposal names a frame that the source does not have
 */
export function boardFromProposal(source: BoardSource, proposal: Proposal): Board {
  const byId = new Map(source.frames.map((frame) => [frame.id, frame]));
  return {
    projectId: source.projectId,
    projectName: source.projectName,
    revision: source.revision,
    grid: {
      rows: proposal.rows,
      columns: proposal.columns,
      shotOrder: proposal.shotOrder,
      overlapWanted: source.options.overlapWanted,
      framesPerTile: source.options.framesPerTile,
      longestPauseSeconds: proposal.longestPauseSeconds,
    },
    stacks: proposal.stacks.map(({ frameIds: _frameIds, ...stack }): BoardStack => {
      return { ...stack, isSettled: false, shareUserId: null, placedBy: "computation" };
    }),
    frames: proposal.frames.map((frame) => {
      const known = byId.get(frame.id);
      if (!known) throw new RangeError(`the proposal names frame ${frame.id}, which is not among the frames`);
      return toBoardFrame(known, frame);
    }),
    seams: proposal.seams,
    questions: proposal.questions.map((question): BoardQuestion => ({ ...question, id: question.key })),
    unreadable: source.unreadable,
    duplicates: source.duplicates,
  };
}

function toBoardFrame(source: SourceFrame, proposed: ProposedFrame): BoardFrame {
  const { measurements, ...frame } = source;
  return {
    ...frame,
    ...proposed,
    widthPx: measurements.widthPx,
    heightPx: measurements.heightPx,
    laplacianVariance: measurements.laplacianVariance,
    meanBrightness: measurements.meanBrightness,
    placedBy: "computation",
  };
}
