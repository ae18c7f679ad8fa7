import type { APIRequestContext, Page } from "@playwright/test";
import { expect } from "@playwright/test";

/** Invented; `.example` is reserved (RFC 2606). */
export interface Person {
  readonly name: string;
  readonly email: string;
  readonly password: string;
}

/** Who makes the first account, and leads the projects of the tests. */
export const LEAD: Person = {
  name: "Alma Reed",
  email: "alma@yard.example",
  password: "twelve grey herons on a wall",
};

let people = 0;

/** Somebody new: no other test knows them. */
export function inventPerson(name: string): Person {
  people++;
  const email = `${name.toLowerCase().replaceAll(" ", ".")}.${process.pid}.${people}@yard.example`;
  return { name, email, password: "seven lanterns along the quay" };
}

/** Signs a browser in by the page, as people do. */
export async function signInByPage(page: Page, person: Person): Promise<void> {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(person.email);
  await page.getByLabel("Password", { exact: true }).fill(person.password);
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await expect(page).toHaveURL(/\/projects$/);
}

/** Signs in over HTTP; a page's own `request` shares its cookies. */
export async function signInByHttp(request: APIRequestContext, person: Person): Promise<void> {
  const { csrfToken } = await (await request.get("/api/auth/csrf")).json();
  const answer = await request.post("/api/auth/callback/credentials", {
    form: { csrfToken, email: person.email, password: person.password, json: "true" },
  });
  expect(answer.status(), await answer.text()).toBe(200);
  expect((await request.get("/api/projects")).status()).toBe(200);
}
