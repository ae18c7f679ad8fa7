"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { BrokenOff } from "@/components/intake/broken-off";
import { CameIn } from "@/components/intake/came-in";
import { DropZone } from "@/components/intake/drop-zone";
import { NotTakenList } from "@/components/intake/not-taken-list";
import { UploadList } from "@/components/intake/upload-list";
import { UploadSummary } from "@/components/intake/upload-summary";
import { useFreshLists, useUploads } from "@/components/intake/uploads-provider";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { intakeQuery, progressQuery } from "@/lib/frames/queries";
import { keyOf, sortChosenFiles, type NotTaken } from "@/lib/uploads/chosen-files";

interface IntakeProps {
  readonly projectId: string;
  readonly canEdit: boolean;
}

const BUSY_MS = 2_500;

/** Bringing files in: where to drop them, how far they are, what came in, and what did not and why. */
export function Intake({ projectId, canEdit }: IntakeProps) {
  const client = useQueryClient();
  const { queue, snapshot } = useUploads(projectId);
  const progress = useQuery(progressQuery(projectId));
  const isBusy = snapshot.counts.sending > 0 || progress.data?.sorted === false;
  const list = useQuery({ ...intakeQuery(projectId), refetchInterval: isBusy ? BUSY_MS : false });
  const [notTaken, setNotTaken] = useState<readonly NotTaken[]>([]);
  const [alreadyIn, setAlreadyIn] = useState(0);
  const [problem, setProblem] = useState<string | null>(null);
  useFreshLists(projectId, snapshot.counts.done);

  const bring = async (files: readonly File[]) => {
    setProblem(null);
    try {
      // Anew, or a file that came in a moment ago would be sent twice.
      const known = await client.fetchQuery({ ...intakeQuery(projectId), staleTime: 0 });
      const chosen = await sortChosenFiles(files, known);
      setNotTaken((now) => [...now, ...chosen.notTaken]);
      setAlreadyIn((now) => now + chosen.alreadyIn);
      queue.add(chosen.outgoing);
    } catch (error) {
      setProblem(error instanceof Error ? error.message : "The files could not be read. Choose them again.");
    }
  };
  const underWay = new Set(
    snapshot.items
      .filter(({ state }) => state === "waiting" || state === "sending")
      .map(({ file }) => keyOf(file.name, file.folder, file.bytes, file.lastModifiedMs)),
  );
  const brokenOff = (list.data?.uploads ?? []).filter(
    (upload) => !underWay.has(keyOf(upload.name, upload.folder ?? "", upload.bytes, upload.lastModifiedMs)),
  );
  return (
    <div className="mx-auto w-full max-w-6xl space-y-8 px-4 py-8 sm:px-5">
      <div>
        <h1 className="text-2xl font-bold">Bring in</h1>
        <p className="mt-1 max-w-[75ch] text-quiet">
          {canEdit
            ? "Every file is stored unchanged under a number of its own; its SHA-256 is taken from what was stored. Nothing is ever overwritten."
            : "What has come in so far. As a viewer you may look; files are brought in by leads and editors."}
        </p>
      </div>
      {canEdit && <DropZone onFiles={bring} />}
      {problem !== null && (
        <Notice tone="madder" live="alert" title="The files were not taken">
          {problem}
        </Notice>
      )}
      {snapshot.items.length > 0 && (
        <section aria-label="On the way" className="space-y-3">
          <UploadSummary queue={queue} snapshot={snapshot} known={list.data} />
          <UploadList queue={queue} items={snapshot.items} />
        </section>
      )}
      <NotTakenList notTaken={notTaken} alreadyIn={alreadyIn} />
      {canEdit && <BrokenOff projectId={projectId} uploads={brokenOff} />}
      {list.error && !list.data ? (
        <Notice tone="madder" live="alert" title="The list could not be fetched">
          <p>{list.error.message}</p>
          <Button size="slim" className="mt-2" onClick={() => void list.refetch()}>
            Try again
          </Button>
        </Notice>
      ) : (
        <CameIn list={list.data} canEdit={canEdit} />
      )}
    </div>
  );
}
