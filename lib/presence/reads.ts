import "server-only";
import { and, asc, desc, eq, isNull } from "drizzle-orm";
import { database, type Database } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { presences } from "@/db/schema/board";
import { members } from "@/db/schema/projects";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { ProjectId, UserId } from "@/lib/ids";

/** Whoever was not heard of for so long has gone: three times what pages leave between two words of theirs, ms. */
export const SILENT_MS = 45_000;

export interface PresentPerson {
  readonly userId: UserId;
  readonly name: string;
  /** Name of the tile that they have open; null: none. */
  readonly tile: string | null;
}

/** Who has the board open: once a person, with the tile that they were on last. By name. */
export async function listPresent(access: ProjectAccess, nowMs: number): Promise<PresentPerson[]> {
  const rows = await selectPresences(database(), access.projectId);
  return presentPeople(rows.filter(({ seenAtMs }) => seenAtMs > nowMs - SILENT_MS));
}

export type PresenceRow = Awaited<ReturnType<typeof selectPresences>>[number];

/** One row a session, the newest first; of members who can sign in only. */
export function selectPresences(db: Pick<Database, "select">, projectId: ProjectId) {
  return db
    .select({ userId: users.id, name: users.name, tile: presences.tile, seenAtMs: presences.seenAtMs })
    .from(presences)
    .innerJoin(members, and(eq(members.projectId, presences.projectId), eq(members.userId, presences.userId)))
    .innerJoin(users, and(eq(users.id, presences.userId), isNull(users.disabledAtMs)))
    .where(eq(presences.projectId, projectId))
    .orderBy(desc(presences.seenAtMs), asc(presences.sessionId));
}

/** @param rows - the newest first */
export function presentPeople(rows: readonly PresenceRow[]): PresentPerson[] {
  const people = new Map<UserId, PresentPerson>();
  for (const { userId, name, tile } of rows) if (!people.has(userId)) people.set(userId, { userId, name, tile });
  return [...people.values()].sort((a, b) => a.name.localeCompare(b.name, "en") || (a.userId < b.userId ? -1 : 1));
}
