import Link from "next/link";
import type { ProjectActions } from "@/components/projects/project-actions";
import { ProjectMenu } from "@/components/projects/project-menu";
import { ProjectStubs } from "@/components/projects/project-stubs";
import type { Role } from "@/lib/auth/roles";
import type { Progress } from "@/lib/frames/schema";

/** What the list shows of a project. */
export interface ListedProject {
  readonly id: string;
  readonly name: string;
  readonly role: Role;
  readonly frames: number;
  readonly tiles: number;
  readonly openQuestions: number;
  readonly progress: Progress;
  readonly members: readonly { readonly userId: string; readonly name: string; readonly role: Role }[];
  readonly bytes: number;
  readonly isArchived: boolean;
  readonly isDemo: boolean;
}

interface ProjectListProps {
  readonly projects: readonly ListedProject[];
  readonly actions: ProjectActions;
}

/** One ticket a project: whose it is, and how far. */
export function ProjectList({ projects, actions }: ProjectListProps) {
  return (
    <ul className="space-y-4">
      {projects.map((project) => (
        <li key={project.id}>
          <ProjectTicket project={project} actions={actions} />
        </li>
      ))}
    </ul>
  );
}

interface ProjectTicketProps {
  readonly project: ListedProject;
  readonly actions: ProjectActions;
}

function ProjectTicket({ project, actions }: ProjectTicketProps) {
  return (
    <article className="border border-ink">
      <div className="flex items-start gap-x-4 px-4 py-3">
        <div className="min-w-0 flex-1">
          <h3 className="text-lg leading-6 font-bold break-words">
            <Link href={`/projects/${project.id}`} className="underline-offset-4 hover:underline">
              {project.name}
            </Link>
          </h3>
          <p className="mt-0.5 text-sm text-quiet">{peopleLine(project)}</p>
        </div>
        {project.role === "lead" && <ProjectMenu project={menuFacts(project)} actions={actions} />}
      </div>
      <ProjectStubs project={{ id: project.id, name: project.name, status: { ...project, ...project.progress } }} />
    </article>
  );
}

function menuFacts({ id, name, bytes, frames, isArchived }: ListedProject) {
  return { id, name, bytes, frames, isArchived };
}

/** "You are lead · with Jonas Treve (editor) and Ines Okell (viewer)". */
function peopleLine({ role, members, isDemo }: ListedProject): string {
  const own = isDemo ? `Demo project · you are ${role}` : `You are ${role}`;
  if (members.length < 2) return `${own}, alone`;
  return `${own} · ${members.map((member) => `${member.name} (${member.role})`).join(", ")}`;
}
