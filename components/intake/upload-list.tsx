"use client";

import { useVirtualizer } from "@tanstack/react-virtual";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Progress } from "@/components/ui/progress";
import { bytesText } from "@/lib/board/words";
import type { UploadItem, UploadQueue, UploadState } from "@/lib/uploads/upload-queue";

interface UploadListProps {
  readonly queue: UploadQueue;
  readonly items: readonly UploadItem[];
}

const ROW_PX = 44;
const TALLEST_PX = 352;
/** What needs a person first, then what moves, then what waits. */
const ORDER: Readonly<Record<UploadState, number>> = { failed: 0, sending: 1, waiting: 2, cancelled: 3, done: 4 };

/** Every file of this tab with its progress. Only rows in view are drawn. */
export function UploadList({ queue, items }: UploadListProps) {
  const [scroller, setScroller] = useState<HTMLElement | null>(null);
  const sorted = [...items].sort((a, b) => ORDER[a.state] - ORDER[b.state] || a.id - b.id);
  const virtualizer = useVirtualizer({
    count: sorted.length,
    getScrollElement: () => scroller,
    estimateSize: () => ROW_PX,
    getItemKey: (at) => sorted[at]?.id ?? at,
    overscan: 4,
  });
  return (
    <div
      ref={setScroller}
      tabIndex={0}
      role="region"
      aria-label="Files on the way"
      style={{ height: Math.min(TALLEST_PX, sorted.length * ROW_PX + 2) }}
      className="overflow-y-auto border border-hairline"
    >
      <ul className="relative" style={{ height: virtualizer.getTotalSize() }}>
        {virtualizer.getVirtualItems().map((row) => {
          const item = sorted[row.index];
          return item ? (
            <li
              key={row.key}
              style={{ transform: `translateY(${row.start}px)`, height: ROW_PX }}
              className="absolute top-0 left-0 flex w-full items-center gap-3 border-b border-hairline px-3 text-sm"
            >
              <Row item={item} queue={queue} />
            </li>
          ) : null;
        })}
      </ul>
    </div>
  );
}

function Row({ item, queue }: { readonly item: UploadItem; readonly queue: UploadQueue }) {
  const { file, state } = item;
  const isOpen = state === "waiting" || state === "sending";
  return (
    <>
      <span className="figures min-w-0 flex-1 truncate" title={pathOf(item)}>
        {file.folder !== "" && <span className="text-quiet max-sm:hidden">{file.folder}/</span>}
        {file.name}
      </span>
      <span className="figures w-20 text-right text-quiet max-sm:hidden">{bytesText(file.bytes)}</span>
      <span className="w-40 max-sm:w-24">
        {state === "sending" ? (
          <Progress label={`${file.name} sent`} value={item.sentBytes} most={Math.max(1, file.bytes)} size="slim" />
        ) : (
          <span className={state === "failed" ? "font-semibold text-madder" : "text-quiet"}>{STATE_WORDS[state]}</span>
        )}
      </span>
      {item.message !== null && (
        <span className="min-w-0 flex-1 truncate text-madder" title={item.message}>
          {item.message}
        </span>
      )}
      <span className="flex w-24 justify-end">
        {isOpen && (
          <Button size="slim" tone="bare" aria-label={`Cancel ${file.name}`} onClick={() => queue.cancel(item.id)}>
            Cancel
          </Button>
        )}
        {state === "failed" && (
          <Button size="slim" aria-label={`Try ${file.name} again`} onClick={() => queue.retry(item.id)}>
            Try again
          </Button>
        )}
      </span>
    </>
  );
}

const STATE_WORDS: Readonly<Record<UploadState, string>> = {
  waiting: "waits its turn",
  sending: "on the way",
  done: "in",
  failed: "failed",
  cancelled: "cancelled",
};

function pathOf({ file }: UploadItem): string {
  return file.folder === "" ? file.name : `${file.folder}/${file.name}`;
}
