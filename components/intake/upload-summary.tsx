"use client";

import { Check } from "lucide-react";
import { Button, buttonClass } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { Progress } from "@/components/ui/progress";
import { bytesText, countOf, groupDigits, pauseText } from "@/lib/board/words";
import type { IntakeList } from "@/lib/frames/schema";
import { keyOf } from "@/lib/uploads/chosen-files";
import type { Hold, UploadQueue, UploadSnapshot } from "@/lib/uploads/upload-queue";

interface UploadSummaryProps {
  readonly queue: UploadQueue;
  readonly snapshot: UploadSnapshot;
  /** What the server says it has; undefined: not asked yet. */
  readonly known: IntakeList | undefined;
}

/** All files of this tab together: how far, how fast, how long; and when everything is in, the counts that prove it. */
export function UploadSummary({ queue, snapshot, known }: UploadSummaryProps) {
  const { counts, hold } = snapshot;
  const given = snapshot.items.length - counts.cancelled;
  const isUnfinished = counts.waiting + counts.sending > 0;
  const text = `${groupDigits(counts.done)} of ${countOf(given, "file")} in`;
  return (
    <div className="space-y-3">
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2">
        <h2 className="text-lg font-bold">{isUnfinished ? "On the way" : "Sent"}</h2>
        <p className="figures flex flex-wrap gap-x-5 text-sm">
          {[text, bytesOf(snapshot), ...rateOf(snapshot)].map((fact) => (
            <span key={fact}>{fact}</span>
          ))}
        </p>
        <span className="ml-auto flex flex-wrap gap-2">
          {counts.failed > 0 && (
            <Button size="slim" onClick={() => queue.retryAll()}>
              Try {countOf(counts.failed, "failed file")} again
            </Button>
          )}
          {isUnfinished ? (
            <Button size="slim" onClick={() => queue.cancelAll()}>
              Cancel all
            </Button>
          ) : (
            <Button size="slim" tone="bare" onClick={() => queue.clear()}>
              Clear the list
            </Button>
          )}
        </span>
      </div>
      {isUnfinished && (
        <Progress label="All files" value={snapshot.sentBytes} most={Math.max(1, snapshot.totalBytes)} text={text} />
      )}
      {hold && <HoldNotice hold={hold} onGoOn={() => queue.goOn()} />}
      {!isUnfinished && counts.done > 0 && <EverythingIn snapshot={snapshot} known={known} />}
    </div>
  );
}

function HoldNotice({ hold, onGoOn }: { readonly hold: Hold; readonly onGoOn: () => void }) {
  return (
    <Notice tone={hold.kind === "offline" ? "plain" : "ochre"} live="status" title={hold.message}>
      <div className="flex flex-wrap gap-2">
        {hold.kind === "signed-out" && (
          <a href="/sign-in" target="_blank" rel="noreferrer" className={buttonClass({ size: "slim" })}>
            Sign in again (in a new tab)
          </a>
        )}
        <Button size="slim" onClick={onGoOn}>
          Go on
        </Button>
      </div>
    </Notice>
  );
}

/** What was given here against what the server lists: files and bytes, and the hashes of what is stored. */
function EverythingIn({ snapshot, known }: Pick<UploadSummaryProps, "snapshot" | "known">) {
  const done = snapshot.items.filter(({ state }) => state === "done");
  const listed = new Map(
    (known?.files ?? []).map((file) => [
      keyOf(file.name, file.folder ?? "", file.bytes, file.lastModifiedMs),
      file.sha256 !== null,
    ]),
  );
  const found = done.map(({ file }) => listed.get(keyOf(file.name, file.folder, file.bytes, file.lastModifiedMs)));
  const stored = found.filter((hashed) => hashed !== undefined).length;
  const hashed = found.filter((isHashed) => isHashed === true).length;
  const isWhole = stored === done.length && snapshot.counts.failed === 0;
  const facts = [
    `${countOf(done.length, "file")} sent from here`,
    `${groupDigits(stored)} listed as stored with the same name and size`,
    `${groupDigits(hashed)} hashed (SHA-256) from what was stored`,
    ...(snapshot.counts.failed > 0 ? [`${groupDigits(snapshot.counts.failed)} failed`] : []),
  ];
  return (
    <div role="status" className="border-l-4 border-ink bg-tray px-4 py-3">
      <p className="flex items-center gap-2 font-semibold">
        {isWhole && <Check aria-hidden size={18} />}
        {isWhole ? "Everything is in" : "Checking against what is stored"}
      </p>
      <ul className="figures mt-1 text-sm">
        {facts.map((fact) => (
          <li key={fact}>{fact}</li>
        ))}
      </ul>
    </div>
  );
}

function bytesOf({ sentBytes, totalBytes }: UploadSnapshot): string {
  return sentBytes === totalBytes ? bytesText(totalBytes) : `${bytesText(sentBytes)} of ${bytesText(totalBytes)}`;
}

function rateOf({ bytesPerSecond, secondsLeft }: UploadSnapshot): string[] {
  if (bytesPerSecond === null) return [];
  const left =
    secondsLeft === null || !Number.isFinite(secondsLeft) ? [] : [`${pauseText(Math.ceil(secondsLeft))} left`];
  return [`${bytesText(bytesPerSecond)}/s`, ...left];
}
