import "server-only";
import { eq, lte, sql } from "drizzle-orm";
import { database, writeTransaction, type Transaction } from "@/db/client";
import { files, uploads } from "@/db/schema/frames";
import { members, projects } from "@/db/schema/projects";
import { removals } from "@/db/schema/removals";
import type { ProjectAccess, SignedInUser } from "@/lib/auth/gate";
import { wantSortingAnew } from "@/lib/board/sorting-writes";
import { AppError } from "@/lib/errors/app-error";
import { newId, projectIdSchema, type ProjectId } from "@/lib/ids";
import { requestJob } from "@/lib/jobs/queue";
import { sortJobRequest } from "@/lib/jobs/requests";
import { removeStored } from "@/lib/storage/disk";
import type { NewProject, ProjectChange, ProjectSettings } from "@/lib/projects/schema";

/** Makes a project; whoever makes it is its lead. */
export async function createProject(
  user: Pick<SignedInUser, "id">,
  { name, overlapWanted, framesPerTile }: NewProject,
  marks: { readonly isDemo?: boolean } = {},
): Promise<ProjectId> {
  const id = projectIdSchema.parse(newId());
  const nowMs = Date.now();
  await writeTransaction(async (tx) => {
    await tx.insert(projects).values({
      id,
      name,
      overlapWanted,
      framesLeast: framesPerTile.least,
      framesMost: framesPerTile.most,
      isDemo: marks.isDemo ?? false,
      createdAtMs: nowMs,
    });
    await tx.insert(members).values({ projectId: id, userId: user.id, role: "lead", joinedAtMs: nowMs });
  });
  return id;
}

/** What the proposal rests on, as the table has it. */
const SETTINGS = {
  overlapWanted: projects.overlapWanted,
  framesLeast: projects.framesLeast,
  framesMost: projects.framesMost,
  longestPauseSeconds: projects.longestPauseSeconds,
  expectedRows: projects.expectedRows,
  expectedColumns: projects.expectedColumns,
};
type SettingName = keyof typeof SETTINGS;

/** What stacks and places follow from: changed, the earlier results no longer hold. The rest only raises questions. */
const SORTED_BY: ReadonlySet<SettingName> = new Set(["longestPauseSeconds", "expectedRows", "expectedColumns"]);

/** Name, archive and settings at once, as PATCH sends them. What the proposal rests on, changed, asks for a new sorting. */
export async function changeProject(access: ProjectAccess, change: ProjectChange): Promise<void> {
  const { framesPerTile, isArchived, name, ...rest } = change;
  const nowMs = Date.now();
  const settings = {
    ...rest,
    ...(framesPerTile && { framesLeast: framesPerTile.least, framesMost: framesPerTile.most }),
  };
  await writeTransaction(async (tx) => {
    const changed = await changedSettings(tx, access, settings);
    const isAnew = changed.some((setting) => SORTED_BY.has(setting));
    const asksForSorting = changed.length > 0 && !isAnew;
    await tx
      .update(projects)
      .set({
        ...settings,
        ...(name !== undefined && { name }),
        ...(isArchived !== undefined && { archivedAtMs: isArchived ? nowMs : null }),
        ...(asksForSorting && { contentVersion: sql`${projects.contentVersion} + 1` }),
      })
      .where(eq(projects.id, access.projectId));
    if (isAnew) await wantSortingAnew(tx, access, "changed settings that the sorting follows", nowMs);
    else if (asksForSorting) await requestJob(tx, sortJobRequest(access.projectId, 0), nowMs);
  });
}

/** Those that are other than they are now: a form sends them all, changed or not. */
async function changedSettings(
  tx: Transaction,
  access: ProjectAccess,
  settings: Partial<Record<SettingName, number | null | undefined>>,
): Promise<SettingName[]> {
  const [now] = await tx.select(SETTINGS).from(projects).where(eq(projects.id, access.projectId));
  const names = Object.keys(SETTINGS) as SettingName[];
  return names.filter((name) => settings[name] !== undefined && settings[name] !== now?.[name]);
}

export function renameProject(access: ProjectAccess, name: string): Promise<void> {
  return changeProject(access, { name });
}

export function archiveProject(access: ProjectAccess, isArchived: boolean): Promise<void> {
  return changeProject(access, { isArchived });
}

export function updateSettings(access: ProjectAccess, settings: ProjectSettings): Promise<void> {
  return changeProject(access, settings);
}

/**
 * Deletes a project with its originals and previews: first the rows, with a note of what lies on the disk, then the
 * files. Killed in between, `sweepRemovals` goes on from the note.
 * @param confirmation the project's name, typed by the person
 * @returns bytes freed on disk
 * @throws AppError invalid where the confirmation is not the name; not_found where it went meanwhile
 */
export async function deleteProject(access: ProjectAccess, confirmation: string): Promise<{ freedBytes: number }> {
  const { projectId } = access;
  const stored = await writeTransaction(async (tx) => {
    const [project] = await tx.select({ name: projects.name }).from(projects).where(eq(projects.id, projectId));
    if (!project) throw new AppError("not_found", "This project is deleted already.");
    if (confirmation.normalize("NFC").trim() !== project.name) throw notTheName();
    const uploadRows = await tx.select({ id: uploads.id }).from(uploads).where(eq(uploads.projectId, projectId));
    const fileRows = await tx.select({ id: files.id }).from(files).where(eq(files.projectId, projectId));
    const note = { uploadIds: uploadRows.map(({ id }) => id), fileIds: fileRows.map(({ id }) => id) };
    await tx.insert(removals).values({ ...note, createdAtMs: Date.now() });
    await tx.delete(projects).where(eq(projects.id, projectId));
    return note;
  });
  return { freedBytes: await removeStored(stored) };
}

function notTheName(): AppError {
  const message = "Type the project's name exactly as it is written.";
  return new AppError("invalid", message, { fields: [{ field: "confirmation", message }] });
}

/** By then no request or worker that began before the deletion still writes a file of it, ms. */
const REMOVAL_SETTLES_MS = 2 * 60 * 1000;

/**
 * Takes away what deleted projects left on the disk: after a kill in the middle, or written by somebody who had begun
 * before. For the worker, at its start and every minute; may run twice at once.
 * @returns bytes freed
 */
export async function sweepRemovals(nowMs: number): Promise<number> {
  const due = await database()
    .select({ id: removals.id, uploadIds: removals.uploadIds, fileIds: removals.fileIds })
    .from(removals)
    .where(lte(removals.createdAtMs, nowMs - REMOVAL_SETTLES_MS));
  let freedBytes = 0;
  for (const { id, ...stored } of due) {
    freedBytes += await removeStored(stored);
    await writeTransaction((tx) => tx.delete(removals).where(eq(removals.id, id)));
  }
  return freedBytes;
}
