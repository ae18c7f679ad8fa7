import type { Metadata } from "next";
import { Board } from "@/components/board/board";
import { openProject, openSession } from "@/lib/auth/page-gate";
import { allows } from "@/lib/auth/roles";
import { getProject } from "@/lib/projects/reads";

export const metadata: Metadata = { title: "Board" };

interface BoardPageProps {
  readonly params: Promise<{ readonly projectId: string }>;
}

export default async function BoardPage({ params }: BoardPageProps) {
  const access = await openProject((await params).projectId, "view");
  const [user, project] = await Promise.all([openSession(), getProject(access)]);
  return (
    <>
      <h1 className="sr-only">Board</h1>
      <Board
        projectId={access.projectId}
        userId={user.id}
        canEdit={allows(access.role, "edit") && !project.isArchived}
      />
    </>
  );
}
