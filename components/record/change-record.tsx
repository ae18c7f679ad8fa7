"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useState } from "react";
import { RecordFilterBar } from "@/components/record/record-filter";
import { UndoBackDialog } from "@/components/record/undo-back-dialog";
import { useRecordFilter } from "@/components/record/use-record-filter";
import { Button } from "@/components/ui/button";
import { Chip } from "@/components/ui/chip";
import { LocalTime } from "@/components/ui/local-time";
import { Notice } from "@/components/ui/notice";
import type { RecordEntry } from "@/lib/board/command-answers";
import { recordQuery } from "@/lib/board/queries";

interface ChangeRecordProps {
  readonly projectId: string;
  readonly canEdit: boolean;
}

/** Who did what and when, newest first; and the way back to any step. */
export function ChangeRecord({ projectId, canEdit }: ChangeRecordProps) {
  const { filter, change } = useRecordFilter();
  const record = useInfiniteQuery(recordQuery(projectId, filter));
  const [target, setTarget] = useState<RecordEntry | null>(null);
  const pages = record.data?.pages ?? [];
  const entries = pages.flatMap((page) => page.entries);
  const isFiltered = filter.person !== null || filter.tile !== null;
  return (
    <div className="mx-auto w-full max-w-5xl px-4 py-8 sm:px-5">
      <h1 className="text-2xl font-bold">Change record</h1>
      <p className="mt-2 max-w-prose">
        Every step on the board, the newest first. Nothing in it is ever erased: an undo is a step of its own.
      </p>
      <RecordFilterBar key={filter.tile} filter={filter} people={pages[0]?.people ?? []} onChange={change} />
      {record.error && (
        <div className="mt-6 space-y-3">
          <Notice tone="madder" live="alert" title="The record could not be fetched.">
            {record.error.message}
          </Notice>
          <Button onClick={() => void record.refetch()}>Try again</Button>
        </div>
      )}
      {record.isPending && <p className="mt-6 text-quiet">Fetching the record…</p>}
      {record.data && entries.length === 0 && <NoSteps projectId={projectId} isFiltered={isFiltered} />}
      {entries.length > 0 && (
        <ol aria-label="Steps, the newest first" className="mt-6 border-t border-ink">
          {entries.map((entry, at) => (
            <Step
              key={entry.id}
              projectId={projectId}
              entry={entry}
              // The newest step of all has nothing after it.
              onBack={canEdit && (at > 0 || isFiltered) ? () => setTarget(entry) : null}
            />
          ))}
        </ol>
      )}
      {record.hasNextPage && (
        <Button className="mt-5" isBusy={record.isFetchingNextPage} onClick={() => void record.fetchNextPage()}>
          Show older steps
        </Button>
      )}
      {target && <UndoBackDialog projectId={projectId} entry={target} onClose={() => setTarget(null)} />}
    </div>
  );
}

interface StepProps {
  readonly projectId: string;
  readonly entry: RecordEntry;
  readonly onBack: (() => void) | null;
}

function Step({ projectId, entry, onBack }: StepProps) {
  const { person, sentence, tiles, atMs, isUndone } = entry;
  return (
    <li className="flex flex-wrap items-baseline gap-x-4 gap-y-1 border-b border-hairline py-2.5">
      <span className="figures w-44 shrink-0 text-sm text-quiet">
        <LocalTime atMs={atMs} withSeconds />
      </span>
      <span className="min-w-0 flex-1 basis-64 break-words">
        <strong>{person?.name ?? "Stackyard"}</strong> {sentence === "" ? "sorted the frames" : sentence}
        {isUndone && (
          <>
            {" "}
            <Chip>undone</Chip>
          </>
        )}
        {tiles.length > 0 && (
          <span className="ml-2 inline-flex flex-wrap gap-x-2 text-sm">
            {tiles.slice(0, TILES_MOST).map((tile) => (
              <Link
                key={tile}
                href={`/projects/${projectId}/board?tile=${tile}`}
                aria-label={`${tile} on the board`}
                className="link inline-flex min-h-6 items-center pointer-coarse:min-h-11"
              >
                {tile}
              </Link>
            ))}
          </span>
        )}
      </span>
      {onBack && (
        <Button size="slim" tone="bare" aria-label={`Undo back to here: ${sentence}`} onClick={onBack}>
          Undo back to here
        </Button>
      )}
    </li>
  );
}

/** A step that touches half the board names no tiles: the sentence says it. */
const TILES_MOST = 4;

function NoSteps({ projectId, isFiltered }: { readonly projectId: string; readonly isFiltered: boolean }) {
  return (
    <p className="mt-6 border-y border-ink py-6">
      {isFiltered ? (
        "No step fits this choice of person and tile."
      ) : (
        <>
          Nothing has been done yet. Steps appear here as soon as somebody changes something on the{" "}
          <Link href={`/projects/${projectId}/board`} className="link">
            board
          </Link>
          .
        </>
      )}
    </p>
  );
}
