"use client";

import { useSyncExternalStore } from "react";

interface LocalTimeProps {
  readonly atMs: number;
  readonly withSeconds?: boolean;
}

/** A moment in the reader's own time zone: "2026-12-01 09:41", or with seconds. Until the browser knows its zone: UTC, said so. */
export function LocalTime({ atMs, withSeconds = false }: LocalTimeProps) {
  const isBrowser = useSyncExternalStore(
    subscribeToNothing,
    () => true,
    () => false,
  );
  const moment = new Date(atMs);
  return (
    <time dateTime={moment.toISOString()} className="whitespace-nowrap">
      {isBrowser ? inLocalZone(moment, withSeconds) : inUtc(moment, withSeconds)}
    </time>
  );
}

function subscribeToNothing() {
  return () => undefined;
}

function inUtc(moment: Date, withSeconds: boolean): string {
  return `${moment
    .toISOString()
    .slice(0, withSeconds ? 19 : 16)
    .replace("T", " ")} UTC`;
}

function inLocalZone(moment: Date, withSeconds: boolean): string {
  const two = (value: number) => String(value).padStart(2, "0");
  const seconds = withSeconds ? `:${two(moment.getSeconds())}` : "";
  const day = `${moment.getFullYear()}-${two(moment.getMonth() + 1)}-${two(moment.getDate())}`;
  return `${day} ${two(moment.getHours())}:${two(moment.getMinutes())}${seconds}`;
}
