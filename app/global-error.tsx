"use client";

import "./globals.css";
import { UnexpectedFailure } from "@/components/shell/unexpected-failure";

interface GlobalErrorProps {
  readonly error: Error & { readonly digest?: string };
  readonly reset: () => void;
}

/** The root layout itself failed: this page brings its own document. */
export default function GlobalError({ error, reset }: GlobalErrorProps) {
  return (
    <html lang="en">
      <body>
        <title>Stackyard</title>
        <main className="mx-auto max-w-5xl px-4 py-8 sm:px-5">
          <UnexpectedFailure digest={error.digest} onRetry={reset} />
        </main>
      </body>
    </html>
  );
}
