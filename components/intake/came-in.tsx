"use client";

import { useState } from "react";
import { CameInList } from "@/components/intake/came-in-list";
import { classNames } from "@/components/ui/class-names";
import { Notice } from "@/components/ui/notice";
import { bytesText, countOf, groupDigits } from "@/lib/board/words";
import type { IntakeFile, IntakeList } from "@/lib/frames/schema";

interface CameInProps {
  /** Undefined: not fetched yet. */
  readonly list: IntakeList | undefined;
  readonly canEdit: boolean;
}

type Choice = "all" | IntakeFile["state"];

const CHOICES: readonly { readonly choice: Choice; readonly label: string }[] = [
  { choice: "all", label: "All" },
  { choice: "failed", label: "Could not be read" },
  { choice: "duplicate", label: "Here already" },
  { choice: "received", label: "Wait to be measured" },
  { choice: "analysed", label: "Measured or kept" },
];

/** What the server has: every file, and why one is not on the board. */
export function CameIn({ list, canEdit }: CameInProps) {
  const [choice, setChoice] = useState<Choice>("all");
  if (!list) return <p className="text-quiet">Fetching the list…</p>;
  const { files } = list;
  if (files.length === 0) {
    return (
      <section aria-label="What came in">
        <h2 className="text-lg font-bold">What came in</h2>
        <p className="mt-1 text-quiet">
          Nothing yet. {canEdit ? "Drop the folder of the shoot above: all of it at once, or card by card." : ""}
        </p>
      </section>
    );
  }
  const counts = countStates(files);
  const states = CHOICES.filter(({ choice: of }) => of !== "all" && counts[of] > 0);
  const shown = choice === "all" ? files : files.filter((file) => listedAs(file) === choice);
  const bytes = files.reduce((sum, file) => sum + file.bytes, 0);
  return (
    <section aria-label="What came in" className="space-y-3">
      <div className="flex flex-wrap items-baseline gap-x-6 gap-y-1">
        <h2 className="text-lg font-bold">What came in</h2>
        <p className="figures flex gap-x-5 text-sm text-quiet">
          <span>{countOf(files.length, "file")}</span>
          <span>{bytesText(bytes)}</span>
        </p>
      </div>
      {list.sortError !== null && (
        <Notice tone="madder" live="status" title="The frames could not be sorted">
          {list.sortError}
        </Notice>
      )}
      <div role="group" aria-label="Which files are listed" className="flex flex-wrap gap-x-5 border-b border-hairline">
        {[...CHOICES.slice(0, 1), ...(states.length > 1 ? states : [])].map(({ choice: of, label }) => (
          <button
            key={of}
            type="button"
            aria-pressed={choice === of}
            onClick={() => setChoice(of)}
            className={classNames(
              "min-h-9 border-b-3 text-sm font-semibold pointer-coarse:min-h-11",
              choice === of ? "border-petrol" : "border-transparent hover:border-line",
              of === "failed" ? "text-madder" : choice !== of && "text-quiet",
            )}
          >
            {label} <span className="figures">{groupDigits(of === "all" ? files.length : counts[of])}</span>
          </button>
        ))}
      </div>
      <CameInList files={[...shown].sort(byPlace)} />
    </section>
  );
}

const collator = new Intl.Collator("en", { numeric: true });

/** As a folder lists them: the camera's counter as a number. */
function byPlace(a: IntakeFile, b: IntakeFile): number {
  return collator.compare(a.folder ?? "", b.folder ?? "") || collator.compare(a.name, b.name);
}

/** A raw file without its picture counts as unreadable everywhere, until the picture comes. */
function listedAs({ state, isRaw, frameId }: IntakeFile): IntakeFile["state"] {
  return state === "analysed" && isRaw && frameId === null ? "failed" : state;
}

function countStates(files: readonly IntakeFile[]): Record<IntakeFile["state"], number> {
  const counts = { received: 0, analysed: 0, failed: 0, duplicate: 0 };
  for (const file of files) counts[listedAs(file)] += 1;
  return counts;
}
