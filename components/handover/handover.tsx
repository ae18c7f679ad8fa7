"use client";

import { Check } from "lucide-react";
import Link from "next/link";
import { useMemo } from "react";
import { BoardFailure } from "@/components/board/board-states";
import { useLiveBoard } from "@/components/board/use-live-board";
import { Downloads } from "@/components/handover/downloads";
import { LinkButton } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { countInUse, indexBoard, type BoardIndex } from "@/lib/board/board-index";
import { openPoints, setAsideCounts, type OpenPoint } from "@/lib/board/readiness";
import { countOf, groupDigits } from "@/lib/board/words";

interface HandoverProps {
  readonly projectId: string;
  readonly canEdit: boolean;
}

/** What is missing or unsettled first, then the counts, then the manifest. */
export function Handover({ projectId, canEdit }: HandoverProps) {
  const { board, progress, error, retry } = useLiveBoard(projectId);
  const index = useMemo(() => (board ? indexBoard(board) : null), [board]);
  if (!index || !progress) {
    return error ? (
      <BoardFailure message={error} onRetry={retry} />
    ) : (
      <p className="p-8 text-quiet">Fetching the board…</p>
    );
  }
  const isEmpty = index.board.frames.length === 0;
  return (
    <div className="mx-auto w-full max-w-6xl space-y-8 px-4 py-8 sm:px-5">
      <div>
        <h1 className="text-2xl font-bold">Hand over</h1>
        <p className="mt-1 max-w-[75ch] text-quiet">
          The manifest says for every frame which stack and which place it has, with the SHA-256 of each of its files:
          whoever merges can tell that all of it arrived, unchanged.
        </p>
      </div>
      {!progress.sorted && !isEmpty && (
        <Notice title="Files are still being measured or sorted" live="status">
          What you download now holds what is sorted so far.
        </Notice>
      )}
      {isEmpty ? (
        <NothingYet projectId={projectId} canEdit={canEdit} />
      ) : (
        <>
          <OpenPoints projectId={projectId} points={openPoints(index)} />
          <div className="grid gap-x-16 gap-y-8 lg:grid-cols-[minmax(0,22rem)_minmax(0,1fr)]">
            <Counts index={index} />
            <Downloads projectId={projectId} />
          </div>
        </>
      )}
    </div>
  );
}

function NothingYet({ projectId, canEdit }: HandoverProps) {
  return (
    <section>
      <h2 className="text-lg font-bold">Nothing to hand over yet</h2>
      <p className="mt-1 mb-4">As soon as frames are in and sorted, their manifest is here.</p>
      {canEdit && (
        <LinkButton tone="petrol" href={`/projects/${projectId}/intake`}>
          Bring in frames
        </LinkButton>
      )}
    </section>
  );
}

function OpenPoints({ projectId, points }: { readonly projectId: string; readonly points: readonly OpenPoint[] }) {
  if (points.length === 0) {
    return (
      <p className="flex items-center gap-2 border-l-4 border-ink bg-tray px-4 py-3 font-semibold">
        <Check aria-hidden size={18} /> Nothing is missing and nothing is unsettled.
      </p>
    );
  }
  return (
    <section aria-label="Missing or unsettled">
      <h2 className="text-lg font-bold">Missing or unsettled</h2>
      <ul className="mt-2 border-l-4 border-ochre">
        {points.map((open) => (
          <li
            key={open.kind}
            className="flex flex-wrap items-baseline gap-x-4 gap-y-1 border-b border-hairline px-4 py-2 last:border-b-0"
          >
            <span className="min-w-0 flex-1 basis-80">
              <span className="font-semibold text-ochre">{open.text}</span>
              <span className="block text-sm text-quiet">{open.meaning}</span>
            </span>
            <Link href={hrefOf(projectId, open)} className="link inline-flex min-h-6 items-center text-sm">
              {open.kind === "unreadable"
                ? "See the list"
                : open.tile === null
                  ? "Show the board"
                  : placeText(open.tile)}
            </Link>
          </li>
        ))}
      </ul>
    </section>
  );
}

function hrefOf(projectId: string, open: OpenPoint): string {
  if (open.kind === "unreadable") return `/projects/${projectId}/intake`;
  const query = open.tile === null ? "" : `?tile=${encodeURIComponent(open.tile)}`;
  return `/projects/${projectId}/board${query}`;
}

function placeText(tile: string): string {
  return tile === "loose" ? "Show loose frames" : `Show ${tile}`;
}

function Counts({ index }: { readonly index: BoardIndex }) {
  const { board, tiles, holes, unplaced } = index;
  const inStacks = board.frames.filter((frame) => frame.stackId !== null);
  const rows: readonly (readonly [string, string])[] = [
    ["Frames", groupDigits(board.frames.length)],
    ["In use", groupDigits(countInUse(inStacks))],
    ...setAsideCounts(index).map(({ reason, count }) => [`Set aside: ${reason}`, groupDigits(count)] as const),
    ["Loose", groupDigits(index.loose.length)],
    ["Files of these frames", groupDigits(board.frames.reduce((sum, frame) => sum + frame.files.length, 0))],
    ["Tiles", `${tiles.size} of ${countOf(tiles.size + holes.size, "place")}`],
    ...(unplaced.length > 0 ? [["Stacks without a place", groupDigits(unplaced.length)] as const] : []),
  ];
  return (
    <section aria-label="What there is">
      <h2 className="text-lg font-bold">What there is</h2>
      <dl className="mt-2 grid max-w-md grid-cols-[1fr_auto] gap-x-8">
        {rows.map(([name, value]) => (
          <div key={name} className="col-span-2 grid grid-cols-subgrid border-b border-hairline py-1.5">
            <dt>{name}</dt>
            <dd className="figures text-right">{value}</dd>
          </div>
        ))}
      </dl>
    </section>
  );
}
