import "server-only";
import { accessForJob } from "@/lib/auth/gate";
import { listDemoProjects, listDemoUserIds, listOtherProjectsOf } from "@/lib/demo/reads";
import { removeDemoAccounts } from "@/lib/demo/writes";
import { deleteProject } from "@/lib/projects/writes";
import { writeDemoState } from "@/lib/storage/demo-state";

/**
 * Takes away the demo project with its originals, and the demo accounts. Works while the product runs; may be repeated.
 * @returns what was taken away
 * @throws Error where a demo account has its hands in another project: its files would go with it
 */
export async function removeDemo(): Promise<{ projects: number; accounts: number; freedBytes: number }> {
  const userIds = await listDemoUserIds();
  const others = await listOtherProjectsOf(userIds);
  if (others.length > 0) {
    const names = others.map((name) => `“${name}”`).join(", ");
    throw new Error(
      `Nothing was removed: the demo's people are also in ${names}. Delete that first (sign in as the demo's lead), ` +
        "then run this again.",
    );
  }
  let freedBytes = 0;
  const projects = await listDemoProjects();
  // The person at the command line owns the installation: nobody is asked.
  for (const { id, name } of projects) {
    freedBytes += (await deleteProject(accessForJob({ projectId: id }), name)).freedBytes;
  }
  await removeDemoAccounts();
  await writeDemoState("removed");
  return { projects: projects.length, accounts: userIds.length, freedBytes };
}
