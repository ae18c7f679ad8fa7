import type { ReactNode } from "react";
import { SiteHeader } from "@/components/shell/site-header";
import { SkipLink } from "@/components/shell/skip-link";

interface PageFrameProps {
  readonly person: { readonly name: string; readonly email: string } | null;
  readonly children: ReactNode;
}

/** Every page outside a project: header, a hairline, one column. */
export function PageFrame({ person, children }: PageFrameProps) {
  return (
    <>
      <SkipLink />
      <div className="border-b border-ink">
        <SiteHeader person={person} />
      </div>
      <main id="content" tabIndex={-1} className="mx-auto w-full max-w-5xl px-4 py-8 sm:px-5 outline-none">
        {children}
      </main>
    </>
  );
}
