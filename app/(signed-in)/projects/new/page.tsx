import type { Metadata } from "next";
import { createProjectForm } from "@/app/(signed-in)/projects/actions";
import { NewProjectForm } from "@/components/projects/new-project-form";
import { PageFrame } from "@/components/shell/page-frame";
import { openSession } from "@/lib/auth/page-gate";
import { DEFAULT_FRAMES_PER_TILE, DEFAULT_OVERLAP_WANTED } from "@/lib/projects/schema";

export const metadata: Metadata = { title: "New project" };

export default async function NewProjectPage() {
  const user = await openSession();
  return (
    <PageFrame person={user}>
      <h1 className="text-3xl font-bold">New project</h1>
      <p className="mt-3 max-w-prose">
        You are its lead. All of this can be changed later; the frames come in on the next page.
      </p>
      <NewProjectForm
        action={createProjectForm}
        initial={{ name: "", overlapWanted: DEFAULT_OVERLAP_WANTED, framesPerTile: DEFAULT_FRAMES_PER_TILE }}
      />
    </PageFrame>
  );
}
