import type { ReactNode } from "react";
import { SiteHeader } from "@/components/shell/site-header";
import { SkipLink } from "@/components/shell/skip-link";
import { YardSheet } from "@/components/shell/yard-sheet";

/** Pages for those who are not signed in: the form on paper, the sheet on the well beside it. */
export default function PublicLayout({ children }: { readonly children: ReactNode }) {
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      <div className="border-b border-ink">
        <SiteHeader person={null} />
      </div>
      <div className="grid flex-1 lg:grid-cols-[minmax(26rem,2fr)_3fr]">
        <main id="content" tabIndex={-1} className="px-4 py-8 outline-none sm:px-10 lg:py-14">
          <div className="max-w-md max-lg:mx-auto">{children}</div>
        </main>
        <aside aria-label="What Stackyard does" className="flex flex-col bg-well max-lg:hidden">
          <YardSheet className="m-auto w-full max-w-4xl p-8" />
          <p className="m-5 self-end bg-paper px-3 py-1.5 text-sm">
            Hundreds of frames, one very large picture: every frame in its stack, every stack in its place.
          </p>
        </aside>
      </div>
    </div>
  );
}
