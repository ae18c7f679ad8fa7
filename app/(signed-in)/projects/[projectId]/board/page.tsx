import type { Metadata } from "next";
import { Board } from "@/components/board/board";
import { openProject } from "@/lib/auth/page-gate";
import { allows } from "@/lib/auth/roles";

export const metadata: Metadata = { title: "Board" };

interface BoardPageProps {
  readonly params: Promise<{ readonly projectId: string }>;
}

export default async function BoardPage({ params }: BoardPageProps) {
  const access = await openProject((await params).projectId, "view");
  return (
    <>
      <h1 className="sr-only">Board</h1>
      <Board projectId={access.projectId} canEdit={allows(access.role, "edit")} />
    </>
  );
}
