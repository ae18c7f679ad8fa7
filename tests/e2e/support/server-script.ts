// Run by the end-to-end tests beside the product, as its own process: `add-account EMAIL NAME PASSWORD`,
// `add-member PROJECT EMAIL ROLE`, `end-sessions EMAIL`. There is no page for members yet.
import { eq } from "drizzle-orm";
import { closeDatabase, writeTransaction } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import { members } from "@/db/schema/projects";
import { ROLES } from "@/lib/auth/roles";
import { projectIdSchema } from "@/lib/ids";
import { newAccountSchema } from "@/lib/people/schema";
import { createAccount } from "@/lib/people/writes";

const [command, first = "", second = "", third = ""] = process.argv.slice(2);

async function addMember(projectId: string, email: string, roleName: string): Promise<void> {
  const role = ROLES.find((candidate) => candidate === roleName);
  if (!role) throw new Error(`no such role: ${roleName}`);
  await writeTransaction(async (tx) => {
    const [user] = await tx.select({ id: users.id }).from(users).where(eq(users.email, email));
    if (!user) throw new Error(`no such account: ${email}`);
    const joinedAtMs = Date.now();
    await tx.insert(members).values({ projectId: projectIdSchema.parse(projectId), userId: user.id, role, joinedAtMs });
  });
}

async function endSessions(email: string): Promise<void> {
  await writeTransaction(async (tx) => {
    const [user] = await tx.select({ id: users.id }).from(users).where(eq(users.email, email));
    if (!user) throw new Error(`no such account: ${email}`);
    await tx.delete(sessions).where(eq(sessions.userId, user.id));
  });
}

if (command === "add-account") {
  await createAccount(newAccountSchema.parse({ email: first, name: second, password: third }));
} else if (command === "add-member") await addMember(first, second, third);
else if (command === "end-sessions") await endSessions(first);
else throw new Error(`no such command: ${command}`);
await closeDatabase();
