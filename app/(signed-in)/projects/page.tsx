import type { Metadata } from "next";
import { archiveProjectForm, deleteProjectForm, renameProjectForm } from "@/app/(signed-in)/projects/actions";
import { ProjectList } from "@/components/projects/project-list";
import { PageFrame } from "@/components/shell/page-frame";
import { LinkButton } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { bytesText } from "@/lib/board/words";
import { openSession } from "@/lib/auth/page-gate";
import { listProjects } from "@/lib/projects/reads";

export const metadata: Metadata = { title: "Projects" };

const ACTIONS = { rename: renameProjectForm, archive: archiveProjectForm, remove: deleteProjectForm };

type Query = Promise<Record<string, string | string[] | undefined>>;

export default async function ProjectsPage({ searchParams }: { readonly searchParams: Query }) {
  const user = await openSession();
  const [projects, query] = await Promise.all([listProjects(user), searchParams]);
  const freedBytes = typeof query.freed === "string" && /^\d{1,15}$/.test(query.freed) ? Number(query.freed) : null;
  return (
    <PageFrame person={user}>
      <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-3">
        <h1 className="text-3xl font-bold">Projects</h1>
        <LinkButton href="/projects/new" tone={projects.length === 0 ? "petrol" : "plain"}>
          New project
        </LinkButton>
      </div>
      {freedBytes !== null && (
        <div className="mt-5">
          <Notice live="status" title={deletedText(freedBytes)} />
        </div>
      )}
      {projects.length === 0 ? <NoProjects /> : <Shelves projects={projects} />}
    </PageFrame>
  );
}

function deletedText(freedBytes: number): string {
  return freedBytes === 0
    ? "The project is deleted."
    : `The project is deleted; ${bytesText(freedBytes)} are free again.`;
}

function Shelves({ projects }: { readonly projects: Awaited<ReturnType<typeof listProjects>> }) {
  const open = projects.filter((project) => !project.isArchived);
  const archived = projects.filter((project) => project.isArchived);
  return (
    <>
      <section aria-labelledby="work-heading" className="mt-6">
        <h2 id="work-heading" className="sr-only">
          At work
        </h2>
        {open.length > 0 ? (
          <ProjectList projects={open} actions={ACTIONS} />
        ) : (
          <p className="border-y border-ink py-6 text-quiet">Nothing at work: every project is in the archive.</p>
        )}
      </section>
      {archived.length > 0 && (
        <section aria-labelledby="archive-heading" className="mt-10">
          <h2 id="archive-heading" className="mb-3 text-xl font-bold">
            Archive
          </h2>
          <ProjectList projects={archived} actions={ACTIONS} />
        </section>
      )}
    </>
  );
}

function NoProjects() {
  return (
    <section aria-labelledby="empty-heading" className="mt-6 border-y border-ink py-8">
      <h2 id="empty-heading" className="text-xl font-bold">
        No project yet
      </h2>
      <p className="mt-2 max-w-prose">
        A project is one very large picture: its frames, its grid of tiles and its people. Make one, then bring in the
        folder of frames as it came from the camera; the files are never changed.
      </p>
      <ol className="mt-5 grid gap-x-8 gap-y-4 sm:grid-cols-3">
        {[
          ["Bring in", "Drop the folder: hundreds of frames at once, raw files beside their JPEGs too."],
          ["Board", "See each frame in its stack and each stack in its place, and what is not sure."],
          ["Hand over", "Download the manifest that says where every frame belongs."],
        ].map(([title, text], index) => (
          <li key={title} className="flex gap-3">
            <span aria-hidden className="text-xl leading-6 font-bold text-quiet">
              {index + 1}
            </span>
            <p>
              <strong>{title}</strong>
              <br />
              {text}
            </p>
          </li>
        ))}
      </ol>
    </section>
  );
}
