"use client";

import { useSyncExternalStore } from "react";

/** A moment in the reader's own time zone: "2026-12-01 09:41". Until the browser knows its zone: UTC, said so. */
export function LocalTime({ atMs }: { readonly atMs: number }) {
  const isBrowser = useSyncExternalStore(
    subscribeToNothing,
    () => true,
    () => false,
  );
  const moment = new Date(atMs);
  return (
    <time dateTime={moment.toISOString()} className="whitespace-nowrap">
      {isBrowser ? inLocalZone(moment) : inUtc(moment)}
    </time>
  );
}

function subscribeToNothing() {
  return () => undefined;
}

function inUtc(moment: Date): string {
  return `${moment.toISOString().slice(0, 16).replace("T", " ")} UTC`;
}

function inLocalZone(moment: Date): string {
  const two = (value: number) => String(value).padStart(2, "0");
  const day = `${moment.getFullYear()}-${two(moment.getMonth() + 1)}-${two(moment.getDate())}`;
  return `${day} ${two(moment.getHours())}:${two(moment.getMinutes())}`;
}
