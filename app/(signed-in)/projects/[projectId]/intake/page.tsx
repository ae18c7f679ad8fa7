import type { Metadata } from "next";
import { Intake } from "@/components/intake/intake";
import { openProject } from "@/lib/auth/page-gate";
import { allows } from "@/lib/auth/roles";

export const metadata: Metadata = { title: "Bring in" };

interface IntakePageProps {
  readonly params: Promise<{ readonly projectId: string }>;
}

export default async function IntakePage({ params }: IntakePageProps) {
  const access = await openProject((await params).projectId, "view");
  return <Intake projectId={access.projectId} canEdit={allows(access.role, "edit")} />;
}
