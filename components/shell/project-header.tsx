import Link from "next/link";
import { SiteHeader } from "@/components/shell/site-header";
import { GridSize } from "@/components/shell/grid-size";
import { PeopleHere } from "@/components/together/people-here";
import { Chip } from "@/components/ui/chip";
import type { SignedInUser } from "@/lib/auth/gate";
import { allows } from "@/lib/auth/roles";
import type { Project } from "@/lib/projects/reads";

interface ProjectHeaderProps {
  readonly person: SignedInUser;
  readonly project: Project;
}

/** The header inside a project: its name, the size of its grid, its record, its settings for who may change them, and who is here. */
export function ProjectHeader({ person, project }: ProjectHeaderProps) {
  return (
    <SiteHeader person={person} beside={<PeopleHere projectId={project.id} userId={person.id} />}>
      <div className="flex flex-wrap items-baseline gap-x-3 gap-y-1">
        <p className="min-w-0 font-bold break-words max-sm:flex-1">
          <Link href={`/projects/${project.id}`} className="underline-offset-4 hover:underline">
            {project.name}
          </Link>
        </p>
        <GridSize projectId={project.id} initial={project} />
        {project.isArchived && <Chip>in the archive</Chip>}
        <Link href={`/projects/${project.id}/record`} className="link text-sm">
          Change record
        </Link>
        {allows(project.role, "manage") && (
          <Link href={`/projects/${project.id}/settings`} className="link text-sm">
            Settings
          </Link>
        )}
      </div>
    </SiteHeader>
  );
}
