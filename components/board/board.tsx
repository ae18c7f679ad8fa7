"use client";

import { useEffect, useMemo, useState } from "react";
import {
  BoardFailure,
  BoardNews,
  EmptyBoard,
  UnreadableBoard,
  UnsortedBoard,
  WorkingBoard,
} from "@/components/board/board-states";
import { Sheet } from "@/components/board/sheet";
import { useBoardPlace } from "@/components/board/use-board-place";
import { useLiveBoard } from "@/components/board/use-live-board";
import { SaveState } from "@/components/together/save-state";
import { Together } from "@/components/together/together";
import { useBoardWork } from "@/components/together/use-board-work";
import { useShownStatus } from "@/components/together/use-shown-status";
import { useSortingNews } from "@/components/together/use-sorting-news";
import { useOnline } from "@/components/ui/use-online";
import { indexBoard } from "@/lib/board/board-index";

interface BoardProps {
  readonly projectId: string;
  readonly userId: string;
  /** Editors and leads of a project that is not in the archive. */
  readonly canEdit: boolean;
}

/** From here on there is room for the rail and the grid (look.md). */
const WIDE = "(min-width: 1024px)";

/** The one container of the board page: asks for the data, decides what stands there. */
export function Board({ projectId, userId, canEdit }: BoardProps) {
  const { board: confirmed, progress, isFetching, sortError, retry, error } = useLiveBoard(projectId);
  const work = useBoardWork({ projectId, userId, canEdit, confirmed });
  const { board } = work;
  const index = useMemo(() => (board ? indexBoard(board) : null), [board]);
  useShownStatus(projectId, progress ? index : null);
  useSortingNews({ index, isSorted: progress?.sorted, isFetching, say: work.say });
  const place = useBoardPlace();
  const isWide = useMedia(WIDE);
  const isOnline = useOnline();

  if (!index || !progress) {
    return error ? (
      <BoardFailure message={error} onRetry={retry} />
    ) : (
      <p className="p-8 text-quiet">Fetching the board…</p>
    );
  }
  if (index.board.frames.length === 0) {
    if (progress.total === 0) return <EmptyBoard projectId={projectId} canEdit={canEdit} />;
    if (sortError !== null) return <UnsortedBoard projectId={projectId} sortError={sortError} />;
    if (progress.sorted && !isFetching) return <UnreadableBoard projectId={projectId} received={progress.received} />;
    return <WorkingBoard progress={progress} />;
  }
  return (
    <Together {...{ projectId, userId, work }} chosen={place.chosen} board={index.board}>
      {/* The sheet fills what header, ticket and notices leave of the window; rail and grid scroll on their own. */}
      <div className={isWide ? "flex min-h-136 shrink-0 grow basis-0 flex-col" : "flex flex-col"}>
        <BoardNews
          projectId={projectId}
          progress={progress}
          sortError={sortError}
          isStale={error !== null && isOnline}
          onRetry={retry}
        />
        <Sheet
          index={index}
          chosen={place.chosen}
          onChoose={place.choose}
          view={place.view}
          onShow={place.show}
          isWide={isWide}
          saved={canEdit ? <SaveState queue={work.queue} /> : null}
        />
      </div>
    </Together>
  );
}

function useMedia(query: string): boolean {
  const [matches, setMatches] = useState(true);
  useEffect(() => {
    const list = window.matchMedia(query);
    const update = () => setMatches(list.matches);
    update();
    list.addEventListener("change", update);
    return () => list.removeEventListener("change", update);
  }, [query]);
  return matches;
}
