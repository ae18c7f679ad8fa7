"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import { useFreshLists, useUploads } from "@/components/intake/uploads-provider";
import { countOf, groupDigits } from "@/lib/board/words";

/** On the project's other pages: that files are on the way from this tab, and what holds them up. */
export function UploadsStrip({ projectId }: { readonly projectId: string }) {
  const { snapshot } = useUploads(projectId);
  const pathname = usePathname();
  const { counts, hold } = snapshot;
  const href = `/projects/${projectId}/intake`;
  useFreshLists(projectId, counts.done);
  if (pathname === href || counts.waiting + counts.sending + counts.failed === 0) return null;
  const given = snapshot.items.length - counts.cancelled;
  return (
    <p className="flex flex-wrap gap-x-4 border-b border-hairline bg-tray px-4 py-1.5 text-sm">
      <Link href={href} className="link figures inline-flex min-h-6 items-center">
        Sending from this tab: {groupDigits(counts.done)} of {countOf(given, "file")} in
      </Link>
      {hold && <span className="font-semibold text-ochre">{hold.message}</span>}
      {counts.failed > 0 && <span className="font-semibold text-madder">{countOf(counts.failed, "file")} failed</span>}
    </p>
  );
}
