import type { Metadata } from "next";
import { Handover } from "@/components/handover/handover";
import { openProject } from "@/lib/auth/page-gate";
import { allows } from "@/lib/auth/roles";

export const metadata: Metadata = { title: "Hand over" };

interface HandoverPageProps {
  readonly params: Promise<{ readonly projectId: string }>;
}

export default async function HandoverPage({ params }: HandoverPageProps) {
  const access = await openProject((await params).projectId, "view");
  return <Handover projectId={access.projectId} canEdit={allows(access.role, "edit")} />;
}
