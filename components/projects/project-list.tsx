import Link from "next/link";
import type { ProjectActions } from "@/components/projects/project-actions";
import { ProjectMenu } from "@/components/projects/project-menu";
import { Chip } from "@/components/ui/chip";
import { countOf } from "@/lib/board/words";
import type { Role } from "@/lib/auth/roles";

/** What the list shows of a project. */
export interface ListedProject {
  readonly id: string;
  readonly name: string;
  readonly role: Role;
  readonly frames: number;
  readonly tiles: number;
  readonly openQuestions: number;
  readonly members: readonly { readonly userId: string; readonly name: string; readonly role: Role }[];
  readonly bytes: number;
  readonly isArchived: boolean;
  readonly isDemo: boolean;
}

interface ProjectListProps {
  readonly projects: readonly ListedProject[];
  readonly actions: ProjectActions;
}

export function ProjectList({ projects, actions }: ProjectListProps) {
  return (
    <ul className="divide-y divide-hairline border-y border-ink">
      {projects.map((project) => (
        <li key={project.id}>
          <ProjectRow project={project} actions={actions} />
        </li>
      ))}
    </ul>
  );
}

interface ProjectRowProps {
  readonly project: ListedProject;
  readonly actions: ProjectActions;
}

function ProjectRow({ project, actions }: ProjectRowProps) {
  return (
    <article className="grid grid-cols-[1fr_auto] items-start gap-x-6 gap-y-2 py-4 md:grid-cols-[minmax(0,5fr)_minmax(0,4fr)_auto]">
      <div className="min-w-0">
        <h3 className="text-lg font-bold break-words">
          <Link href={`/projects/${project.id}`} className="link">
            {project.name}
          </Link>
        </h3>
        <p className="text-sm text-quiet">{peopleLine(project)}</p>
      </div>
      <div className="max-md:col-span-2 max-md:row-start-2">
        <Facts project={project} />
      </div>
      {project.role === "lead" && (
        <div className="max-md:col-start-2 max-md:row-start-1">
          <ProjectMenu project={project} actions={actions} />
        </div>
      )}
    </article>
  );
}

function Facts({ project }: { readonly project: ListedProject }) {
  if (project.frames === 0) return <p className="text-quiet">No frames yet: bring in the folder first.</p>;
  return (
    <ul className="flex flex-wrap items-center gap-x-5 gap-y-1">
      <li className="figures">{countOf(project.frames, "frame")}</li>
      <li className="figures">{countOf(project.tiles, "tile")}</li>
      <li>
        {project.openQuestions > 0 ? (
          <Chip tone="ochre">{countOf(project.openQuestions, "question")}</Chip>
        ) : (
          <span className="text-quiet">no questions open</span>
        )}
      </li>
    </ul>
  );
}

/** "You are lead, with Jonas Treve and Ines Okell". */
function peopleLine({ role, members, isDemo }: ListedProject): string {
  const own = `${isDemo ? "Demo. " : ""}You are ${role}`;
  const others = members.length - 1;
  if (others < 1) return own;
  const names = members.map((member) => `${member.name} (${member.role})`);
  return `${own} · ${names.join(", ")}`;
}
