import "server-only";
import { and, asc, desc, eq, isNotNull, lt, ne, or, sql } from "drizzle-orm";
import type { z } from "zod";
import { database } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { changes } from "@/db/schema/board";
import type { ProjectAccess } from "@/lib/auth/gate";
import type { recordSchema, UndoState } from "@/lib/board/command-answers";
import type { RecordQuery } from "@/lib/board/record-schema";
import { type RecordedStep, undoneSteps, undoStacksOf } from "@/lib/board/standing";
import { listUndoing, undoesAfter } from "@/lib/board/undo-reads";
import { userIdSchema, type UserId } from "@/lib/ids";

const ENTRIES_A_PAGE = 100;

type Record = z.infer<typeof recordSchema>;

/** Who did what, the newest first, without what was only measured anew. The steps themselves are not read. */
export async function listRecord(access: ProjectAccess, query: RecordQuery): Promise<Record> {
  const { projectId } = access;
  const db = database();
  const rows = await db
    .select({
      id: changes.id,
      revision: changes.revision,
      userId: changes.userId,
      name: users.name,
      type: changes.type,
      sentence: changes.sentence,
      tiles: changes.tiles,
      undoes: changes.undoes,
      atMs: changes.atMs,
    })
    .from(changes)
    .leftJoin(users, eq(users.id, changes.userId))
    .where(and(eq(changes.projectId, projectId), ne(changes.type, "measure"), ...conditions(query)))
    .orderBy(desc(changes.revision))
    .limit(ENTRIES_A_PAGE + 1);
  const page = rows.slice(0, ENTRIES_A_PAGE);
  const undoing = await listUndoing(db, projectId);
  const afterOf = new Map(undoing.map(({ id, undoesAfter }) => [id, undoesAfter]));
  const others = page.filter(({ id }) => !afterOf.has(id)).map((row) => ({ ...row, undoesAfter: null }));
  const undone = undoneSteps([...undoing, ...others]);
  return {
    entries: page.map(({ userId, name, ...entry }) => ({
      ...entry,
      tiles: [...entry.tiles],
      person: userId === null || name === null ? null : { id: userId, name },
      isUndone: undone.has(entry.id),
      undoesAfter: afterOf.get(entry.id) ?? null,
    })),
    next: rows.length > ENTRIES_A_PAGE ? (page.at(-1)?.revision ?? null) : null,
    people: await listActors(projectId),
  };
}

function conditions({ before, person, tile }: RecordQuery) {
  return [
    ...(before === undefined ? [] : [lt(changes.revision, before)]),
    ...(person === undefined ? [] : [eq(changes.userId, userIdSchema.catch("" as UserId).parse(person))]),
    ...(tile === undefined ? [] : [sql`exists (select 1 from json_each(${changes.tiles}) where value = ${tile})`]),
  ];
}

async function listActors(projectId: ProjectAccess["projectId"]) {
  return database()
    .selectDistinct({ id: users.id, name: users.name })
    .from(changes)
    .innerJoin(users, eq(users.id, changes.userId))
    .where(eq(changes.projectId, projectId))
    .orderBy(asc(users.name), asc(users.id));
}

/** The next undo and the next redo of whoever asks. */
export async function getUndoState({ projectId, userId }: ProjectAccess): Promise<UndoState> {
  if (userId === null) return { undo: null, redo: null };
  const rows = await database()
    .select({
      id: changes.id,
      revision: changes.revision,
      userId: changes.userId,
      sentence: changes.sentence,
      undoes: changes.undoes,
      undoesAfter,
      isEmpty: sql<number>`${changes.steps} = '[]'`,
    })
    .from(changes)
    .where(
      and(
        eq(changes.projectId, projectId),
        or(eq(changes.userId, userId), isNotNull(changes.undoes), eq(changes.type, "undo-back-to")),
      ),
    );
  const steps = rows.map((row): RecordedStep => ({ ...row, isEmpty: row.isEmpty === 1 }));
  const { undo, redo } = undoStacksOf(userId, steps);
  return { undo: next(undo), redo: next(redo) };
}

function next([step]: readonly RecordedStep[]): UndoState["undo"] {
  return step ? { commandId: step.id, sentence: step.sentence } : null;
}
