import "server-only";
import { and, asc, eq, inArray, isNotNull } from "drizzle-orm";
import { database } from "@/db/client";
import { changes } from "@/db/schema/board";
import type { PersonChoices } from "@/lib/board/sorting-facts";
import { undoneSteps } from "@/lib/board/standing";
import { listUndoing } from "@/lib/board/undo-reads";
import type { ProjectId } from "@/lib/ids";

/** The references and takes that people chose and have not taken back, from the change record. */
export async function findPersonChoices(projectId: ProjectId): Promise<PersonChoices> {
  const rows = await database()
    .select({ id: changes.id, revision: changes.revision, type: changes.type, steps: changes.steps })
    .from(changes)
    .where(
      and(
        eq(changes.projectId, projectId),
        isNotNull(changes.userId),
        inArray(changes.type, ["choose-reference", "choose-take", "settle"]),
      ),
    )
    .orderBy(asc(changes.revision));
  const undoing = await listUndoing(database(), projectId);
  const undone = undoneSteps([...undoing, ...rows.map((row) => ({ ...row, undoes: null, undoesAfter: null }))]);
  const references = new Map<string, string>();
  const takes = new Set<string>();
  for (const { id, type, steps } of rows) {
    if (undone.has(id)) continue;
    for (const step of steps) {
      if (step.on !== "stack") continue;
      const { referenceId, isChosenTake } = step.after;
      if (type === "choose-reference" && referenceId) references.set(step.id, referenceId);
      if (isChosenTake !== undefined) takes.add(step.id);
    }
  }
  return { references, takes };
}
