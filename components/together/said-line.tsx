"use client";

import { useEffect, useState } from "react";
import type { Said } from "@/components/together/use-board-work";

/** Long enough to be read twice, ms; the change record keeps everything. */
const SHOWN_MS = 8_000;

/** One calm line over the foot of the board: what somebody else changed, or why something cannot be done. */
export function SaidLine({ said }: { readonly said: Said | null }) {
  const [hidden, setHidden] = useState(0);
  useEffect(() => {
    if (!said) return;
    const timer = setTimeout(() => setHidden(said.key), SHOWN_MS);
    return () => clearTimeout(timer);
  }, [said]);
  const isShown = said !== null && said.tone !== "aloud" && said.key !== hidden;
  return (
    <>
      <div aria-live="polite" className="sr-only">
        {said && <p key={said.key}>{said.text}</p>}
      </div>
      {isShown && (
        <div aria-hidden className="pointer-events-none fixed inset-x-0 bottom-10 z-30 flex justify-center px-4">
          <p className="max-w-prose border border-ink bg-paper px-3 py-1.5 text-sm shadow-float">{said.text}</p>
        </div>
      )}
    </>
  );
}
