import Link from "next/link";
import type { ReactNode } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { Progress } from "@/components/ui/progress";
import type { Progress as Counts } from "@/lib/frames/schema";
import { countOf, groupDigits } from "@/lib/board/words";

/** What stands where the board will be. */
function Place({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  return (
    <div className="mx-auto w-full max-w-2xl px-4 py-12 sm:px-5">
      <h2 className="text-2xl font-bold">{title}</h2>
      <div className="mt-3 space-y-4">{children}</div>
    </div>
  );
}

/** Nothing came in yet. */
export function EmptyBoard({ projectId, canEdit }: { readonly projectId: string; readonly canEdit: boolean }) {
  return (
    <Place title="No frames yet">
      <p>
        Here the frames of the shoot will lie in their tiles, in the order of the grid. It needs nothing but the files:
        which frames belong together, and where each tile lies, is found from the pictures and the times in them.
      </p>
      {canEdit ? (
        <LinkButton tone="petrol" href={`/projects/${projectId}/intake`}>
          Bring in frames
        </LinkButton>
      ) : (
        <p className="text-quiet">As a viewer you will see the board as soon as an editor has brought in frames.</p>
      )}
    </Place>
  );
}

/** Frames are in, none is sorted yet. */
export function WorkingBoard({ progress }: { readonly progress: Counts }) {
  const done = progress.analysed + progress.failed;
  const isMeasured = done >= progress.received;
  const text = `${groupDigits(done)} of ${countOf(progress.received, "file")} measured`;
  return (
    <Place title={isMeasured ? "Sorting the frames" : "Measuring the frames"}>
      <div role="status">
        <p className="figures">{text}</p>
        {progress.total > progress.received && (
          <p className="figures text-quiet">{countOf(progress.total - progress.received, "file")} still on the way</p>
        )}
      </div>
      <Progress
        label="Files measured"
        value={isMeasured ? null : done}
        most={Math.max(1, progress.received)}
        text={text}
      />
      <p className="text-quiet">
        The board appears by itself when everything that is in has been measured. You may leave this page meanwhile.
      </p>
    </Place>
  );
}

interface BoardNewsProps {
  readonly projectId: string;
  readonly progress: Counts | undefined;
  readonly sortError: string | null;
  /** The board could not be fetched again: what is shown is what was last known. */
  readonly isStale: boolean;
  readonly onRetry: () => void;
}

/** Above a board that is shown: what is under way, what could not be read, what went wrong. */
export function BoardNews({ projectId, progress, sortError, isStale, onRetry }: BoardNewsProps) {
  const isWorking = progress !== undefined && !progress.sorted && sortError === null;
  const failed = progress?.failed ?? 0;
  if (!isWorking && failed === 0 && sortError === null && !isStale) return null;
  return (
    <div className="flex flex-wrap items-center gap-x-6 gap-y-1 border-b border-hairline bg-tray px-4 py-1.5 text-sm">
      {isStale && (
        <span role="alert" className="flex items-center gap-2 text-madder">
          No answer from the server: this is the board as it was.
          <Button size="slim" onClick={onRetry}>
            Try again
          </Button>
        </span>
      )}
      {sortError !== null && (
        <span role="alert" className="text-madder">
          <span className="font-semibold">The newest frames could not be sorted.</span> {sortError}
        </span>
      )}
      {isWorking && (
        <span role="status" className="figures">
          {progress.analysed + progress.failed < progress.total
            ? `${groupDigits(progress.analysed + progress.failed)} of ${countOf(progress.total, "file")} measured; the board shows what is sorted so far`
            : "Sorting again; what people decided stays"}
        </span>
      )}
      {failed > 0 && (
        <Link href={`/projects/${projectId}/intake`} className="link inline-flex min-h-6 items-center text-madder">
          {countOf(failed, "file")} could not be read
        </Link>
      )}
    </div>
  );
}

/** Everything is measured, and no board came of it. */
export function UnsortedBoard({ projectId, sortError }: { readonly projectId: string; readonly sortError: string }) {
  return (
    <Place title="The frames could not be sorted">
      <Notice tone="madder" live="alert">
        {sortError}
      </Notice>
      <p>
        Nothing is lost: every file that came in is stored unchanged. The sorting is tried again with the next file.
      </p>
      <LinkButton href={`/projects/${projectId}/intake`}>See what came in</LinkButton>
    </Place>
  );
}

/** Files came in, none of them is a frame. */
export function UnreadableBoard({ projectId, received }: { readonly projectId: string; readonly received: number }) {
  return (
    <Place title="No frame among the files">
      <p>
        {countOf(received, "file")} came in, and none is a picture that can be measured. The list says why for each; raw
        files need the picture of the same name beside them.
      </p>
      <LinkButton href={`/projects/${projectId}/intake`}>See what came in</LinkButton>
    </Place>
  );
}

/** The board could not be fetched, and none is known from before. */
export function BoardFailure({ message, onRetry }: { readonly message: string; readonly onRetry: () => void }) {
  return (
    <Place title="The board could not be fetched">
      <Notice tone="madder" live="alert">
        {message}
      </Notice>
      <Button onClick={onRetry}>Try again</Button>
    </Place>
  );
}
