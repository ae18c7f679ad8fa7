import type { Metadata } from "next";
import { ChangeRecord } from "@/components/record/change-record";
import { openProject } from "@/lib/auth/page-gate";
import { allows } from "@/lib/auth/roles";
import { getProject } from "@/lib/projects/reads";

export const metadata: Metadata = { title: "Change record" };

interface RecordPageProps {
  readonly params: Promise<{ readonly projectId: string }>;
}

export default async function RecordPage({ params }: RecordPageProps) {
  const access = await openProject((await params).projectId, "view");
  const { isArchived } = await getProject(access);
  return <ChangeRecord projectId={access.projectId} canEdit={allows(access.role, "edit") && !isArchived} />;
}
