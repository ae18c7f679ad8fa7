"use client";

import { useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { usePathname } from "next/navigation";
import { useEffect, useSyncExternalStore, type ReactNode } from "react";
import type { QueueState } from "@/components/together/command-queue";
import { queueOf } from "@/components/together/queue-of";
import { countWaiting } from "@/components/together/save-state";
import { useOnline } from "@/components/ui/use-online";

interface ConnectionStripProps {
  readonly projectId: string;
  readonly userId: string;
  /** Editors and leads of a project that is not in the archive. */
  readonly canEdit: boolean;
}

/**
 * On every page of a project: sends what an earlier page left behind, and says so while the server is out of reach, the
 * person is signed out, or a change was refused.
 */
export function ConnectionStrip({ projectId, userId, canEdit }: ConnectionStripProps) {
  const queue = queueOf(useQueryClient(), userId, projectId);
  const state = useSyncExternalStore(queue.subscribe, queue.getState, queue.getState);
  const isOnline = useOnline();
  useEffect(() => {
    if (canEdit) queue.resume();
    window.addEventListener("online", queue.tryNow);
    return () => window.removeEventListener("online", queue.tryNow);
  }, [canEdit, queue]);
  const waiting = countWaiting(state);
  useWarningOnLeaving(waiting > 0);
  const text = stripText({ waiting, isOnline, queue: state, canEdit });
  return (
    <div role="status">
      {text !== null && (
        <Line>
          {text}
          {state.connection === "signed out" && (
            <>
              {" "}
              <a href={`/sign-in?to=${encodeURIComponent(window.location.pathname)}`} className="link font-semibold">
                Sign in
              </a>
            </>
          )}
        </Line>
      )}
      <RefusedElsewhere projectId={projectId} count={state.refusals.length} />
    </div>
  );
}

/** The board explains what was refused; on other pages a line leads there. */
function RefusedElsewhere({ projectId, count }: { readonly projectId: string; readonly count: number }) {
  const board = `/projects/${projectId}/board`;
  const pathname = usePathname();
  if (count === 0 || pathname === board) return null;
  return (
    <Line>
      {count === 1 ? "1 change" : `${count} changes`} of yours could not be done.{" "}
      <Link href={board} className="link font-semibold">
        See why on the board
      </Link>
    </Line>
  );
}

function Line({ children }: { readonly children: ReactNode }) {
  return <p className="border-b border-ochre bg-ochre-wash px-4 py-1.5 text-sm text-ochre-on">{children}</p>;
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

/** What waits is kept, but it is sent only while a page is open: whoever closes it should know. */
function useWarningOnLeaving(isWaiting: boolean): void {
  useEffect(() => {
    if (!isWaiting) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", warn);
    return () => window.removeEventListener("beforeunload", warn);
  }, [isWaiting]);
}
