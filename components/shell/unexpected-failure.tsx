"use client";

import { Failure } from "@/components/shell/failure";
import { Button, LinkButton } from "@/components/ui/button";

interface UnexpectedFailureProps {
  /** Next's number of the error, which the server's log has too. */
  readonly digest: string | undefined;
  readonly onRetry: () => void;
}

/** Something failed that nobody expected: no detail here, the log has it. */
export function UnexpectedFailure({ digest, onRetry }: UnexpectedFailureProps) {
  const action = (
    <>
      <Button tone="petrol" onClick={onRetry}>
        Try again
      </Button>
      <LinkButton href="/projects">Go to the projects</LinkButton>
    </>
  );
  return (
    <Failure title="This page did not work" action={action}>
      <p>Something went wrong while it was made. Nothing that was confirmed is lost, and no frame was changed.</p>
      {digest !== undefined && (
        <p>
          If it stays, tell the administrator this number: <code className="inline-block">{digest}</code>
        </p>
      )}
    </Failure>
  );
}
