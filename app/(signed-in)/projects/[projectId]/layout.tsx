import type { Metadata } from "next";
import type { ReactNode } from "react";
import { UploadsStrip } from "@/components/intake/uploads-strip";
import { JobTicket } from "@/components/shell/job-ticket";
import { ProjectHeader } from "@/components/shell/project-header";
import { SkipLink } from "@/components/shell/skip-link";
import { ConnectionStrip } from "@/components/together/connection-strip";
import { findProjectAccess, openProject, openSession } from "@/lib/auth/page-gate";
import { allows } from "@/lib/auth/roles";
import { getProgress } from "@/lib/frames/reads";
import { getProject } from "@/lib/projects/reads";

type Params = Promise<{ projectId: string }>;

// Only names. Who may not open the project learns nothing from the title either: whatever page was asked for, it says
// what the 404 page says.
export async function generateMetadata({ params }: { readonly params: Params }): Promise<Metadata> {
  const name = await findProjectName((await params).projectId);
  if (name === null) return { title: { default: "Nothing here", template: "Nothing here · Stackyard" } };
  return { title: { default: name, template: `%s · ${name} · Stackyard` } };
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
  const { frames, tiles, openQuestions, rows, columns } = project;
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      <ProjectHeader person={person} project={project} />
      <JobTicket projectId={projectId} progress={progress} status={{ frames, tiles, openQuestions, rows, columns }} />
      <UploadsStrip projectId={projectId} />
      <ConnectionStrip
        projectId={projectId}
        userId={person.id}
        canEdit={allows(access.role, "edit") && !project.isArchived}
      />
      <main id="content" tabIndex={-1} className="flex flex-1 flex-col outline-none">
        {children}
      </main>
    </div>
  );
}

async function findProjectName(projectId: string): Promise<string | null> {
  const access = await findProjectAccess(projectId);
  return access && (await getProject(access)).name;
}
