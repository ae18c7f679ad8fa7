"use client";

import { Notice } from "@/components/ui/notice";
import { FetchProblem } from "@/lib/http/fetch-json";

interface TicketProblemProps {
  /** Why the ticket could not be brought up to date. */
  readonly problem: Error;
  /** The page it happened on. */
  readonly path: string;
}

/** What is on the page may be old, and why; with a way back in where the session ended. */
export function TicketProblem({ problem, path }: TicketProblemProps) {
  const isSessionOver = problem instanceof FetchProblem && problem.status === 401;
  if (!isSessionOver) {
    return (
      <Notice live="status" tone="madder" title="What is shown here may be old.">
        {problem instanceof FetchProblem ? problem.detail : "The server's answer could not be read. Reload the page."}
      </Notice>
    );
  }
  return (
    <Notice live="status" tone="madder" title="Your session has ended.">
      {/* In a tab of its own: uploads under way wait in this one and go on once it is looked at again. */}
      <a href={`/sign-in?ended=1&to=${encodeURIComponent(path)}`} target="_blank" className="link font-semibold">
        Sign in again in a new tab
      </a>
      , then come back here.
    </Notice>
  );
}
