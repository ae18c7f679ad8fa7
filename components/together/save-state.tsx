"use client";

import type { QueueState } from "@/components/together/command-queue";
import { countOf } from "@/lib/board/words";

/** At the foot of the board: whether everything asked for is recorded. */
export function SaveState({ queue }: { readonly queue: QueueState }) {
  const waiting = countWaiting(queue);
  return <span className="whitespace-nowrap">{saveText(waiting, queue)}</span>;
}

export function countWaiting({ commands }: QueueState): number {
  return commands.filter(({ revision }) => revision === null).length;
}

function saveText(waiting: number, { connection, savedAtMs }: QueueState): string {
  if (waiting > 0 && connection !== "fine")
    return waiting === 1 ? "1 change waits" : `${countOf(waiting, "change")} wait`;
  if (waiting > 0) return "Saving…";
  return savedAtMs === null ? "All changes saved" : `All changes saved ${clock(savedAtMs)}`;
}

/** In the reader's own zone: "09:58:04". */
function clock(atMs: number): string {
  const at = new Date(atMs);
  return [at.getHours(), at.getMinutes(), at.getSeconds()].map((part) => String(part).padStart(2, "0")).join(":");
}
