import type { Metadata } from "next";
import type { ReactNode } from "react";
import { UploadsStrip } from "@/components/intake/uploads-strip";
import { JobTicket } from "@/components/shell/job-ticket";
import { ProjectHeader } from "@/components/shell/project-header";
import { SkipLink } from "@/components/shell/skip-link";
import { openProject, openSession } from "@/lib/auth/page-gate";
import { getProgress } from "@/lib/frames/reads";
import { getProject } from "@/lib/projects/reads";

type Params = Promise<{ projectId: string }>;

export async function generateMetadata({ params }: { readonly params: Params }): Promise<Metadata> {
  const project = await getProject(await openProject((await params).projectId, "view"));
  return { title: { default: project.name, template: `%s · ${project.name} · Stackyard` } };
}

interface ProjectLayoutProps {
  readonly params: Params;
  readonly children: ReactNode;
}

// The gate stands here and again in every page: a layout is not rendered anew on every navigation.
export default async function ProjectLayout({ params, children }: ProjectLayoutProps) {
  const { projectId } = await params;
  const access = await openProject(projectId, "view");
  const [person, project, progress] = await Promise.all([openSession(), getProject(access), getProgress(access)]);
  const { tiles, openQuestions, rows, columns } = project;
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      <ProjectHeader person={person} project={project} />
      <JobTicket projectId={projectId} progress={progress} status={{ tiles, openQuestions, rows, columns }} />
      <UploadsStrip projectId={projectId} />
      <main id="content" tabIndex={-1} className="flex flex-1 flex-col outline-none">
        {children}
      </main>
    </div>
  );
}
