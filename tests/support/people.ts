import { encode } from "next-auth/jwt";
import { vi } from "vitest";
import { writeTransaction } from "@/db/client";
import { users } from "@/db/schema/accounts";
import { members } from "@/db/schema/projects";
import { hashPassword } from "@/lib/auth/password-hash";
import type { Role } from "@/lib/auth/roles";
import { sessionCookieName } from "@/lib/auth/session";
import { createSession } from "@/lib/auth/sessions";
import { newId, projectIdSchema, userIdSchema, type ProjectId, type UserId } from "@/lib/ids";
import { newProjectSchema } from "@/lib/projects/schema";
import { createProject } from "@/lib/projects/writes";
import { authSecret } from "@/lib/storage/auth-secret";

// The request's cookies and headers, which Next keeps beside the Request object. Import this file before any that
// reads them.
const request = vi.hoisted(() => ({ cookies: new Map<string, string>() }));
vi.mock("next/headers", () => ({
  cookies: async () => ({
    has: (name: string) => request.cookies.has(name),
    get: (name: string) => {
      const value = request.cookies.get(name);
      return value === undefined ? undefined : { name, value };
    },
  }),
  headers: async () => new Headers(),
}));

export const PASSWORD = "harbour lantern violet spoon";
let passwordHash: Promise<string> | undefined;

export interface Person {
  readonly id: UserId;
  readonly email: string;
  readonly name: string;
}

/** An account with the password above. */
export async function makePerson(
  name: string,
  marks: { readonly isAdministrator?: boolean; readonly isDemo?: boolean } = {},
): Promise<Person> {
  passwordHash ??= hashPassword(PASSWORD);
  const hash = await passwordHash;
  const id = userIdSchema.parse(newId());
  const email = `${name.toLowerCase().replaceAll(" ", ".")}@example.org`;
  await writeTransaction((tx) =>
    tx.insert(users).values({ id, email, name, passwordHash: hash, createdAtMs: Date.now(), ...marks }),
  );
  return { id, email, name };
}

export async function makeProject(lead: Person, name = "Harbour"): Promise<ProjectId> {
  return createProject(lead, newProjectSchema.parse({ name }));
}

export async function addMember(projectId: ProjectId, person: Person, role: Role): Promise<void> {
  await writeTransaction((tx) =>
    tx.insert(members).values({
      projectId: projectIdSchema.parse(projectId),
      userId: person.id,
      role,
      joinedAtMs: Date.now(),
    }),
  );
}

/** The following calls carry this person's cookie. @returns the cookie, to be presented again with `presentCookie` */
export async function signInAs(person: Pick<Person, "id">): Promise<string> {
  const sessionId = await createSession(person.id, "test browser");
  const cookie = await encode({ token: { sessionId }, secret: authSecret() });
  presentCookie(cookie);
  return cookie;
}

export function presentCookie(cookie: string): void {
  request.cookies.set(sessionCookieName(), cookie);
}

/** The following calls carry no cookie. */
export function signOut(): void {
  request.cookies.clear();
}
