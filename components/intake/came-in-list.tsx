"use client";

import { useWindowVirtualizer } from "@tanstack/react-virtual";
import { useState } from "react";
import { bytesText } from "@/lib/board/words";
import type { IntakeFile } from "@/lib/frames/schema";

const ROW_PX = 37;

/** The files in the order given. Only rows in view are drawn. */
export function CameInList({ files }: { readonly files: readonly IntakeFile[] }) {
  const [topPx, setTopPx] = useState(0);
  const virtualizer = useWindowVirtualizer({
    count: files.length,
    estimateSize: () => ROW_PX,
    getItemKey: (at) => files[at]?.id ?? at,
    scrollMargin: topPx,
    overscan: 10,
  });
  return (
    <ul
      ref={(element) => setTopPx(element ? Math.round(element.getBoundingClientRect().top + window.scrollY) : 0)}
      aria-label="Files that came in"
      className="relative"
      style={{ height: virtualizer.getTotalSize() }}
    >
      {virtualizer.getVirtualItems().map((row) => {
        const file = files[row.index];
        return file ? (
          <li
            key={row.key}
            data-index={row.index}
            ref={virtualizer.measureElement}
            style={{ transform: `translateY(${row.start - topPx}px)`, minHeight: ROW_PX }}
            className="absolute top-0 left-0 flex w-full flex-wrap items-baseline gap-x-4 border-b border-hairline py-1.5 text-sm"
          >
            <span className="figures min-w-0 basis-72 break-all max-sm:basis-full">
              {file.folder !== null && <span className="text-quiet">{file.folder}/</span>}
              {file.name}
            </span>
            <span className="figures w-20 text-right text-quiet max-sm:w-auto">{bytesText(file.bytes)}</span>
            <State file={file} />
            {file.sha256 !== null && (
              <span className="figures text-quiet max-lg:hidden" title={`SHA-256 ${file.sha256}`}>
                SHA-256 {file.sha256.slice(0, 12)}…
              </span>
            )}
          </li>
        ) : null;
      })}
    </ul>
  );
}

function State({ file }: { readonly file: IntakeFile }) {
  if (file.state === "failed") {
    return (
      <span className="min-w-0 flex-1 text-madder">
        <span className="font-semibold">Could not be read: </span>
        {file.reason}
      </span>
    );
  }
  if (file.state === "duplicate") {
    const { duplicateOf } = file;
    const name = duplicateOf
      ? `${duplicateOf.folder ? `${duplicateOf.folder}/` : ""}${duplicateOf.name}`
      : "another file";
    return <span className="min-w-0 flex-1 break-all">Here already: byte for byte {name}</span>;
  }
  if (file.state === "received") return <span className="min-w-0 flex-1 text-quiet">waits to be measured</span>;
  return (
    <span className="min-w-0 flex-1 text-quiet">{file.reason ?? (file.isRaw ? "raw file, kept" : "measured")}</span>
  );
}
