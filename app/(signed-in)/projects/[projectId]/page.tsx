import { redirect } from "next/navigation";
import { openProject } from "@/lib/auth/page-gate";
import { getProject } from "@/lib/projects/reads";

/** A project opens where its work is: on the board, or on the intake while nothing came in. */
export default async function ProjectPage({ params }: { readonly params: Promise<{ projectId: string }> }) {
  const { projectId } = await params;
  const project = await getProject(await openProject(projectId, "view"));
  redirect(`/projects/${projectId}/${project.frames > 0 ? "board" : "intake"}`);
}
