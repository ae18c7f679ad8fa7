import "server-only";
import { eq } from "drizzle-orm";
import { database } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { members } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import { getBoard } from "@/lib/board/reads";
import { AppError } from "@/lib/errors/app-error";
import { buildManifest } from "@/lib/handover/manifest";
import type { Manifest } from "@/lib/handover/manifest-types";

/** `?share=` for the stacks that nobody merges yet. */
const NOBODY = "none";

/**
 * The manifest of a project as it is now, checked against the schema.
 * @param share - member's id or e-mail address, or `none`; left out: everything
 * @throws AppError not_found where nobody in the project goes by that share
 */
export async function getManifest(access: ProjectAccess, share: string | undefined, nowMs: number): Promise<Manifest> {
  const [board, people] = await Promise.all([getBoard(access), listPeople(access)]);
  const names = new Map<string, string>(people.map(({ id, name }) => [id, name]));
  return buildManifest(board, {
    createdAt: new Date(nowMs).toISOString(),
    hasProjectId: true,
    nameOfMember: (id) => names.get(id) ?? id,
    ...(share === undefined ? {} : { share: { userId: shareOf(share, people) } }),
  });
}

type People = Awaited<ReturnType<typeof listPeople>>;

function shareOf(share: string, people: People): string | null {
  if (share === NOBODY) return null;
  const person = people.find(({ id, email }) => id === share || email === share.trim().toLowerCase());
  if (!person) throw new AppError("not_found", "Nobody in this project has that id or e-mail address.");
  return person.id;
}

async function listPeople(access: ProjectAccess) {
  return database()
    .select({ id: users.id, email: users.email, name: users.name })
    .from(members)
    .innerJoin(users, eq(users.id, members.userId))
    .where(eq(members.projectId, access.projectId));
}
