import Link from "next/link";
import { SiteHeader } from "@/components/shell/site-header";
import { GridSize } from "@/components/shell/grid-size";
import { Chip } from "@/components/ui/chip";
import type { SignedInUser } from "@/lib/auth/gate";
import { allows } from "@/lib/auth/roles";
import type { Project } from "@/lib/projects/reads";

interface ProjectHeaderProps {
  readonly person: SignedInUser;
  readonly project: Project;
}

/** The header inside a project: its name, the size of its grid, and its settings for who may change them. */
export function ProjectHeader({ person, project }: ProjectHeaderProps) {
  return (
    <SiteHeader person={person}>
      <div className="flex flex-wrap items-baseline gap-x-3 gap-y-1">
        <p className="min-w-0 font-bold break-words max-sm:flex-1">
          <Link href={`/projects/${project.id}`} className="underline-offset-4 hover:underline">
            {project.name}
          </Link>
        </p>
        <GridSize projectId={project.id} initial={project} />
        {project.isArchived && <Chip>in the archive</Chip>}
        {allows(project.role, "manage") && (
          <Link href={`/projects/${project.id}/settings`} className="link text-sm">
            Settings
          </Link>
        )}
      </div>
    </SiteHeader>
  );
}
