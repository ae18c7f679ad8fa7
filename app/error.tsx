"use client";

import { UnexpectedFailure } from "@/components/shell/unexpected-failure";

interface ErrorPageProps {
  readonly error: Error & { readonly digest?: string };
  readonly reset: () => void;
}

export default function ErrorPage({ error, reset }: ErrorPageProps) {
  return (
    <main id="content" className="mx-auto max-w-5xl px-4 py-8 sm:px-5">
      <UnexpectedFailure digest={error.digest} onRetry={reset} />
    </main>
  );
}
