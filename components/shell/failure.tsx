import type { ReactNode } from "react";
import { LinkButton } from "@/components/ui/button";

interface FailureProps {
  /** What happened. */
  readonly title: string;
  /** Why, and what to do next. */
  readonly children: ReactNode;
  /** The way on; the project list unless said otherwise. */
  readonly action?: ReactNode;
}

/** A page that could not be shown, in words. */
export function Failure({ title, children, action }: FailureProps) {
  return (
    <div className="max-w-prose py-8">
      <h1 className="text-3xl font-bold">{title}</h1>
      <div className="mt-4 space-y-3">{children}</div>
      <div className="mt-6 flex flex-wrap gap-3">
        {action ?? (
          <LinkButton href="/projects" tone="petrol">
            Go to the projects
          </LinkButton>
        )}
      </div>
    </div>
  );
}
