import "server-only";
import { eq, inArray } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { members, projects } from "@/db/schema/projects";
import { DEMO_ACCOUNTS } from "@/lib/demo/accounts";
import type { ProjectId } from "@/lib/ids";

/** Marks a project as the demo, with the demo's people in it. May be repeated. */
export async function markDemoProject(projectId: ProjectId): Promise<void> {
  await writeTransaction(async (tx) => {
    await tx.update(projects).set({ isDemo: true }).where(eq(projects.id, projectId));
    const people = await tx
      .select({ id: users.id, email: users.email })
      .from(users)
      .where(
        inArray(
          users.email,
          DEMO_ACCOUNTS.map(({ email }) => email),
        ),
      );
    for (const { email, role } of DEMO_ACCOUNTS) {
      const person = people.find((candidate) => candidate.email === email);
      if (!person) throw new Error(`the demo account ${email} is missing`);
      await tx
        .insert(members)
        .values({ projectId, userId: person.id, role, joinedAtMs: Date.now() })
        .onConflictDoNothing();
    }
  });
}

/** Takes the demo's people away; their sign-ins go with them. */
export async function removeDemoAccounts(): Promise<void> {
  await writeTransaction((tx) => tx.delete(users).where(eq(users.isDemo, true)));
}
