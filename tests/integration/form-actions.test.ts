// Before anything that reads cookies.
import { ASKERS, comeAs, makeYard, PROJECT_NAME, type Asker, type Yard } from "../support/yard";
import { readdirSync } from "node:fs";
import path from "node:path";
import { eq } from "drizzle-orm";
import { describe, expect, test, vi } from "vitest";
import { database } from "@/db/client";
import { projects } from "@/db/schema/projects";
import type { FormAction, FormState } from "@/lib/http/form-state";
import { UNTOUCHED_FORM } from "@/lib/http/form-state";
import { useDatabase } from "../support/database";
import { PASSWORD } from "../support/people";

// Next's page cache, which is no part of who may do what.
vi.mock("next/cache", () => ({ revalidatePath: () => undefined }));
useDatabase();

interface ActionRule {
  readonly audience: "everybody" | "signed in" | "manage";
  readonly fields: Readonly<Record<string, string>>;
}

const SETTINGS = { name: "Changed", overlapWanted: "40", least: "2", most: "9" };

/** Every form's server action is an endpoint of its own: a new one without an entry fails. */
const ACTIONS: Readonly<Record<string, Readonly<Record<string, ActionRule>>>> = {
  "(public)/first-account/actions.ts": {
    makeFirstAccount: {
      audience: "everybody",
      fields: { name: "Intruder", email: "intruder@example.org", password: PASSWORD },
    },
  },
  "(signed-in)/account/actions.ts": {
    changeNameForm: { audience: "signed in", fields: { name: "New name" } },
    changePasswordForm: { audience: "signed in", fields: { current: PASSWORD, next: "pebble orchard kettle swan" } },
    endSessionForm: { audience: "signed in", fields: { sessionId: "none" } },
    endOtherSessionsForm: { audience: "signed in", fields: {} },
  },
  "(signed-in)/projects/actions.ts": {
    createProjectForm: { audience: "signed in", fields: SETTINGS },
    renameProjectForm: { audience: "manage", fields: { name: "Changed" } },
    saveSettingsForm: { audience: "manage", fields: SETTINGS },
    archiveProjectForm: { audience: "manage", fields: { isArchived: "true" } },
    deleteProjectForm: { audience: "manage", fields: { confirmation: PROJECT_NAME } },
  },
};

async function loadActions(file: string): Promise<Record<string, FormAction>> {
  return (await import(`../../app/${file}`)) as Record<string, FormAction>;
}

/** What the form answers; an address where it leads on to another page. */
async function submit(file: string, name: string, yard: Yard): Promise<FormState | string> {
  const action = (await loadActions(file))[name];
  if (!action) throw new Error(`${file} has no ${name}`);
  const form = new FormData();
  form.set("projectId", yard.projectId);
  for (const [field, value] of Object.entries(ACTIONS[file]?.[name]?.fields ?? {})) form.set(field, value);
  try {
    return await action(UNTOUCHED_FORM, form);
  } catch (error) {
    // Next's redirect() throws, with the address in its digest.
    const digest = error instanceof Error && "digest" in error ? String(error.digest) : "";
    if (!digest.startsWith("NEXT_REDIRECT;")) throw error;
    return digest.split(";")[2] ?? "";
  }
}

async function readState(yard: Yard): Promise<unknown> {
  const [row] = await database()
    .select({ name: projects.name, archivedAtMs: projects.archivedAtMs, overlapWanted: projects.overlapWanted })
    .from(projects)
    .where(eq(projects.id, yard.projectId));
  return row;
}

test("every form's action is in the list", async () => {
  const files = readdirSync(path.resolve(import.meta.dirname, "../../app"), { recursive: true, encoding: "utf8" })
    .filter((file) => path.basename(file) === "actions.ts")
    .sort();
  expect(Object.keys(ACTIONS).sort()).toEqual(files);
  for (const file of files) {
    expect(Object.keys(ACTIONS[file] ?? {}).sort()).toEqual(Object.keys(await loadActions(file)).sort());
  }
});

const WITHOUT_SESSION: readonly Asker[] = ["nobody", "disabled editor", "editor who has signed out", "forger"];
const CASES = Object.entries(ACTIONS).flatMap(([file, actions]) =>
  Object.entries(actions).map(([name, rule]) => ({ file, name, rule })),
);

describe.each(CASES)("$name", ({ file, name, rule }) => {
  test.each(ASKERS)("%s", async (asker) => {
    const yard = await makeYard();
    const before = await readState(yard);
    await comeAs(asker, yard);
    const answer = await submit(file, name, yard);
    if (rule.audience === "everybody") {
      // The first account: everybody may ask, and there is one already.
      expect(answer).toMatchObject({ status: "refused", message: expect.stringContaining("exists already") });
      return;
    }
    if (WITHOUT_SESSION.includes(asker)) {
      expect(answer).toMatch(/^\/sign-in/);
      expect(await readState(yard)).toEqual(before);
      return;
    }
    if (rule.audience === "signed in" || asker === "lead") {
      if (typeof answer === "string") expect(answer).toMatch(/^\/projects/);
      else expect(answer.status).toBe("done");
      return;
    }
    expect(answer).toMatchObject({ status: "refused" });
    expect(await readState(yard)).toEqual(before);
  });
});

const MANAGING = CASES.filter(({ rule }) => rule.audience === "manage");

test.each(MANAGING)("$name on a project in the archive", async ({ file, name }) => {
  const yard = await makeYard();
  await database().update(projects).set({ archivedAtMs: 1 }).where(eq(projects.id, yard.projectId));
  await comeAs("lead", yard);
  const answer = await submit(file, name, yard);
  if (name === "deleteProjectForm") expect(answer).toMatch(/^\/projects\?freed=/);
  else if (name === "archiveProjectForm") expect(answer).toMatchObject({ status: "done" });
  else
    expect(answer).toMatchObject({ status: "refused", message: expect.stringContaining("out of the archive first") });
});
