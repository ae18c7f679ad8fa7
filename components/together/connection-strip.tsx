"use client";

import { useEffect, useSyncExternalStore } from "react";
import type { QueueState } from "@/components/together/command-queue";
import { countWaiting } from "@/components/together/save-state";

/** Above the board while the server is out of reach, or the person is signed out: what becomes of their changes. */
export function ConnectionStrip({ queue, canEdit }: { readonly queue: QueueState; readonly canEdit: boolean }) {
  const isOnline = useSyncExternalStore(
    subscribeToConnection,
    () => navigator.onLine,
    () => true,
  );
  const waiting = countWaiting(queue);
  useWarningOnLeaving(waiting > 0);
  const text = stripText({ waiting, isOnline, queue, canEdit });
  return (
    <div role="status">
      {text !== null && (
        <p className="border-b border-ochre bg-ochre-wash px-4 py-1.5 text-sm text-ochre-on">
          {text}
          {queue.connection === "signed out" && (
            <>
              {" "}
              <a href={`/sign-in?to=${encodeURIComponent(window.location.pathname)}`} className="link font-semibold">
                Sign in
              </a>
            </>
          )}
        </p>
      )}
    </div>
  );
}

interface StripInput {
  readonly waiting: number;
  readonly isOnline: boolean;
  readonly queue: QueueState;
  readonly canEdit: boolean;
}

function stripText({ waiting, isOnline, queue, canEdit }: StripInput): string | null {
  const changes = waiting === 1 ? "1 change waits" : `${waiting} changes wait`;
  const sent = waiting === 1 ? "is sent" : "are sent";
  const where = queue.isKept ? "on this computer" : "in this window, which must stay open,";
  if (queue.connection === "signed out" && waiting > 0) {
    return `You are signed out. ${changes} ${where} and ${sent} when you have signed in again.`;
  }
  if (waiting > 0 && (queue.connection === "none" || !isOnline)) {
    return `No connection. ${changes} ${where} and ${sent} when it is back.`;
  }
  if (isOnline) return null;
  return canEdit
    ? "No connection. This is the board as it was; what you change waits on this computer and is sent when it is back."
    : "No connection. This is the board as it was.";
}

function subscribeToConnection(tell: () => void): () => void {
  window.addEventListener("online", tell);
  window.addEventListener("offline", tell);
  return () => {
    window.removeEventListener("online", tell);
    window.removeEventListener("offline", tell);
  };
}

/** What waits is kept, but it is sent only while a page is open: whoever closes it should know. */
function useWarningOnLeaving(isWaiting: boolean): void {
  useEffect(() => {
    if (!isWaiting) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", warn);
    return () => window.removeEventListener("beforeunload", warn);
  }, [isWaiting]);
}
