import { addMember, makePerson, makeProject, presentCookie, signInAs, signOut, type Person } from "./people";
import { eq } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { sessions, users } from "@/db/schema/accounts";
import type { FileId, FrameId, ProjectId, UploadId } from "@/lib/ids";
import { addStoredFrame, addUnfinishedUpload } from "./full-project";

/** Everybody who may come to a project's door. */
export const ASKERS = [
  "lead",
  "editor",
  "viewer",
  "lead of another project",
  "administrator who is no member",
  "nobody",
  "disabled editor",
  "editor who has signed out",
  "forger",
] as const;
export type Asker = (typeof ASKERS)[number];

export const PROJECT_NAME = "Quiet estuary 7391";
export const FILE_NAME = "SECRET_7391.jpg";

/** What the calls of the matrix are made on: a project with one frame, and an upload that its editor has begun. */
export interface Target {
  readonly projectId: ProjectId;
  readonly projectName: string;
  readonly frameId: FrameId;
  readonly fileId: FileId;
  readonly uploadId: UploadId;
}

export interface Yard extends Target {
  readonly people: Record<"lead" | "editor" | "viewer" | "stranger" | "administrator" | "disabled", Person>;
}

/** A project with its people, and another with a stranger's. */
export async function makeYard(): Promise<Yard> {
  const people = {
    lead: await makePerson("Lead"),
    editor: await makePerson("Editor"),
    viewer: await makePerson("Viewer"),
    stranger: await makePerson("Stranger"),
    administrator: await makePerson("Administrator", { isAdministrator: true }),
    disabled: await makePerson("Disabled"),
  };
  const projectId = await makeProject(people.lead, PROJECT_NAME);
  await addMember(projectId, people.editor, "editor");
  await addMember(projectId, people.viewer, "viewer");
  await addMember(projectId, people.disabled, "editor");
  await makeProject(people.stranger, "Elsewhere");
  const stored = await addStoredFrame(projectId, people.editor, FILE_NAME);
  const uploadId = await addUnfinishedUpload(projectId, people.editor, FILE_NAME);
  return { ...stored, projectId, projectName: PROJECT_NAME, uploadId, people };
}

/** The following call comes from them. */
export async function comeAs(asker: Asker, { people }: Yard): Promise<void> {
  signOut();
  if (asker === "nobody") return;
  if (asker === "forger") return presentCookie("eyJhbGciOiJkaXIiLCJlbmMiOiJBMjU2R0NNIn0..AAAA.AAAA.AAAA");
  if (asker === "disabled editor") {
    await signInAs(people.disabled);
    // Not through disableAccount: that ends the session too, and it is the mark on the account that must refuse here.
    await disableKeepingSession(people.disabled);
    return;
  }
  if (asker === "editor who has signed out") {
    await signInAs(people.editor);
    await writeTransaction((tx) => tx.delete(sessions).where(eq(sessions.userId, people.editor.id)));
    return;
  }
  const person = {
    lead: people.lead,
    editor: people.editor,
    viewer: people.viewer,
    "lead of another project": people.stranger,
    "administrator who is no member": people.administrator,
  }[asker];
  await signInAs(person);
}

async function disableKeepingSession(person: Person): Promise<void> {
  await writeTransaction((tx) => tx.update(users).set({ disabledAtMs: 1 }).where(eq(users.id, person.id)));
}
