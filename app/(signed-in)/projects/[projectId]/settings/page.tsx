import type { Metadata } from "next";
import { archiveProjectForm, deleteProjectForm, saveSettingsForm } from "@/app/(signed-in)/projects/actions";
import { ArchiveForm } from "@/components/projects/archive-form";
import { DeleteButton } from "@/components/projects/delete-button";
import { SettingsForm } from "@/components/projects/settings-form";
import { openProject } from "@/lib/auth/page-gate";
import { getProject } from "@/lib/projects/reads";

export const metadata: Metadata = { title: "Settings" };

export default async function SettingsPage({ params }: { readonly params: Promise<{ projectId: string }> }) {
  const project = await getProject(await openProject((await params).projectId, "manage", true));
  return (
    <div className="mx-auto w-full max-w-6xl px-4 py-8 sm:px-5">
      <h1 className="text-2xl font-bold">Settings</h1>
      <div className="mt-2 grid gap-x-16 md:grid-cols-2">
        {!project.isArchived && <SettingsForm project={project} action={saveSettingsForm} />}
        <div>
          <section aria-labelledby="archive-heading" className="mt-8 max-w-prose border-t border-ink pt-5">
            <h2 id="archive-heading" className="text-xl font-bold">
              Archive
            </h2>
            <p className="mt-2">
              {project.isArchived
                ? "This project is in the archive: everyone in it can look, nobody can change anything."
                : "In the archive everyone in the project can still look, and nobody can change anything. It can be taken out again."}
            </p>
            <ArchiveForm project={project} action={archiveProjectForm} />
          </section>
          <section aria-labelledby="delete-heading" className="mt-8 max-w-prose border-t border-ink pt-5">
            <h2 id="delete-heading" className="text-xl font-bold">
              Delete
            </h2>
            <p className="mt-2">
              Takes the frames stored here, the board and everything decided on it away for everyone, for good.
            </p>
            <DeleteButton project={project} action={deleteProjectForm} />
          </section>
        </div>
      </div>
    </div>
  );
}
