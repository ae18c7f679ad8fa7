"use client";

import { UnexpectedFailure } from "@/components/shell/unexpected-failure";

interface ErrorInProjectProps {
  readonly error: Error & { readonly digest?: string };
  readonly reset: () => void;
}

/** Header and job ticket stay: only the view below them failed. */
export default function ErrorInProject({ error, reset }: ErrorInProjectProps) {
  return (
    <div className="mx-auto w-full max-w-6xl px-4 sm:px-5">
      <UnexpectedFailure digest={error.digest} onRetry={reset} />
    </div>
  );
}
