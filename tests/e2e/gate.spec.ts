import { expect, test, type APIRequestContext, type APIResponse } from "@playwright/test";
import { listAppFiles } from "../support/routes";
import { LEAD, inventPerson, signInByHttp, type Person } from "./support/people";
import { addAccount, addMember, endSessionsOf } from "./support/server";
import { makeProject } from "./support/uploads";

const ASKERS = ["lead", "editor", "viewer", "lead of another project", "administrator who is no member"] as const;
type Member = (typeof ASKERS)[number];
type Asker = Member | "nobody" | "editor whose session has ended" | "forger";

interface PageRule {
  readonly path: string;
  /** What a person who may gets: 200, or where the page leads on to. */
  readonly answer: 200 | RegExp;
  /** Where it leads somebody who is signed in; absent: the same. */
  readonly signedIn?: RegExp;
  /** product.md: view for every member, manage for leads only. everybody: no session is asked for. */
  readonly audience: "everybody" | "signed in" | "view" | "manage";
}

const SIGN_IN = /\/sign-in(\?|$)/;

/** Every page of the product; a new one without an entry fails. PROJECT stands for the project's id. */
const PAGES: Readonly<Record<string, PageRule>> = {
  "(public)/first-account/page.tsx": { path: "/first-account", answer: SIGN_IN, audience: "everybody" },
  "(public)/sign-in/page.tsx": {
    path: "/sign-in",
    answer: 200,
    signedIn: /\/projects$/,
    audience: "everybody",
  },
  "(signed-in)/account/page.tsx": { path: "/account", answer: 200, audience: "signed in" },
  "(signed-in)/projects/page.tsx": { path: "/projects", answer: 200, audience: "signed in" },
  "(signed-in)/projects/new/page.tsx": { path: "/projects/new", answer: 200, audience: "signed in" },
  "(signed-in)/projects/[projectId]/page.tsx": {
    path: "/projects/PROJECT",
    answer: /\/projects\/[^/]+\/(intake|board)$/,
    audience: "view",
  },
  "(signed-in)/projects/[projectId]/board/page.tsx": { path: "/projects/PROJECT/board", answer: 200, audience: "view" },
  "(signed-in)/projects/[projectId]/handover/page.tsx": {
    path: "/projects/PROJECT/handover",
    answer: 200,
    audience: "view",
  },
  "(signed-in)/projects/[projectId]/intake/page.tsx": {
    path: "/projects/PROJECT/intake",
    answer: 200,
    audience: "view",
  },
  "(signed-in)/projects/[projectId]/record/page.tsx": {
    path: "/projects/PROJECT/record",
    answer: 200,
    audience: "view",
  },
  "(signed-in)/projects/[projectId]/settings/page.tsx": {
    path: "/projects/PROJECT/settings",
    answer: 200,
    audience: "manage",
  },
  "page.tsx": { path: "/", answer: /\/(projects|sign-in)$/, audience: "everybody" },
};

/** Statuses of the table of rights; undefined: may. */
function refusal(audience: PageRule["audience"], asker: Asker): 307 | 403 | 404 | undefined {
  if (audience === "everybody") return undefined;
  if (!hasSession(asker)) return 307;
  if (audience === "signed in") return undefined;
  if (asker === "lead of another project" || asker === "administrator who is no member") return 404;
  return audience === "manage" && asker !== "lead" ? 403 : undefined;
}

function hasSession(asker: Asker): boolean {
  return asker !== "nobody" && asker !== "forger" && asker !== "editor whose session has ended";
}

const PROJECT_NAME = "Quiet estuary 7391";

async function expectAnswers(request: APIRequestContext, projectId: string, asker: Asker): Promise<void> {
  for (const [file, rule] of Object.entries(PAGES)) {
    const response = await request.get(rule.path.replace("PROJECT", projectId), { maxRedirects: 0 });
    await test.step(`${asker}: ${file}`, () => expectAnswer(response, rule, asker));
  }
}

async function expectAnswer(response: APIResponse, rule: PageRule, asker: Asker): Promise<void> {
  const what = `${rule.path} as ${asker}`;
  const refused = refusal(rule.audience, asker);
  const text = await response.text();
  if (refused !== undefined) {
    expect.soft(response.status(), what).toBe(refused);
    if (refused === 307) expect.soft(response.headers().location, what).toMatch(SIGN_IN);
    if (refused !== 403) expect.soft(text.includes(PROJECT_NAME), `${what} names the project`).toBe(false);
    return;
  }
  const answer = hasSession(asker) ? (rule.signedIn ?? rule.answer) : rule.answer;
  expect.soft(response.status(), what).toBe(answer === 200 ? 200 : 307);
  if (answer !== 200) expect.soft(response.headers().location, what).toMatch(answer);
}

test("every page of the product is in the list", () => {
  expect(Object.keys(PAGES).sort()).toEqual(listAppFiles("page.tsx"));
});

test("every page answers everybody as the table of rights says", async ({ playwright, baseURL }) => {
  const open = () => playwright.request.newContext({ baseURL });
  const signIn = async (person: Person) => {
    const request = await open();
    await signInByHttp(request, person);
    return request;
  };
  const [lead, editor, viewer, stranger] = ["Lea Gate", "Edo Gate", "Vio Gate", "Sten Gate"].map(inventPerson);
  if (!lead || !editor || !viewer || !stranger) throw new Error("four people were invented");
  for (const person of [lead, editor, viewer, stranger]) await addAccount(person);
  const requests: Record<Member, APIRequestContext> = {
    lead: await signIn(lead),
    editor: await signIn(editor),
    viewer: await signIn(viewer),
    "lead of another project": await signIn(stranger),
    // The first account administers the installation; it is in none of this project's roles.
    "administrator who is no member": await signIn(LEAD),
  };
  const projectId = await makeProject(requests.lead, PROJECT_NAME);
  await makeProject(requests["lead of another project"], "Elsewhere");
  await addMember(projectId, editor, "editor");
  await addMember(projectId, viewer, "viewer");

  for (const asker of ASKERS) await expectAnswers(requests[asker], projectId, asker);
  const foreign = await (await requests["lead of another project"].get("/api/projects")).text();
  expect(foreign).not.toContain(PROJECT_NAME);

  await endSessionsOf(editor);
  await expectAnswers(requests.editor, projectId, "editor whose session has ended");
  await expectAnswers(await open(), projectId, "nobody");
  const forged = await playwright.request.newContext({
    baseURL,
    extraHTTPHeaders: { cookie: "next-auth.session-token=eyJhbGciOiJkaXIiLCJlbmMiOiJBMjU2R0NNIn0..AAAA.AAAA.AAAA" },
  });
  await expectAnswers(forged, projectId, "forger");
});

test("the session's cookie is out of reach of scripts, and signing out ends it on the server", async ({
  playwright,
  baseURL,
}) => {
  const person = inventPerson("Cora Gate");
  await addAccount(person);
  const request = await playwright.request.newContext({ baseURL });
  await signInByHttp(request, person);
  const { cookies } = await request.storageState();
  const cookie = cookies.find(({ name }) => name === "next-auth.session-token");
  expect(cookie).toMatchObject({ httpOnly: true, sameSite: "Lax", path: "/", secure: false });

  const { csrfToken } = await (await request.get("/api/auth/csrf")).json();
  const stolen = { cookie: `next-auth.session-token=${cookie?.value}` };
  const thief = await playwright.request.newContext({ baseURL, extraHTTPHeaders: stolen });
  expect((await thief.get("/api/projects")).status()).toBe(200);
  await request.post("/api/auth/signout", { form: { csrfToken, json: "true" } });
  expect((await request.get("/api/projects")).status()).toBe(401);
  // Not only is the cookie gone from the browser: it is worth nothing any more.
  const refused = await thief.get("/api/projects");
  expect(refused.status()).toBe(401);
  expect(refused.headers()["content-type"]).toContain("application/problem+json");
  expect(await refused.json()).toMatchObject({ code: "unauthenticated" });
});

test("after ten wrong passwords the eleventh try waits, whatever address the client claims", async ({
  playwright,
  baseURL,
}) => {
  const person = inventPerson("Wil Gate");
  await addAccount(person);
  const request = await playwright.request.newContext({ baseURL });
  const { csrfToken } = await (await request.get("/api/auth/csrf")).json();
  const trySignIn = async (password: string, claimed: string) => {
    const answer = await request.post("/api/auth/callback/credentials", {
      form: { csrfToken, email: person.email, password, json: "true" },
      headers: { "x-forwarded-for": claimed },
    });
    return { status: answer.status(), error: new URL((await answer.json()).url).searchParams.get("error") };
  };
  for (let n = 1; n <= 10; n++) {
    expect(await trySignIn("wrong", `203.0.113.${n}`)).toEqual({ status: 401, error: "CredentialsSignin" });
  }
  const eleventh = await trySignIn(person.password, "203.0.113.99");
  expect(eleventh).toEqual({ status: 401, error: expect.stringMatching(/^wait-\d+$/) });
});

test("answers carry the security headers, and say nothing of what they run on", async ({ request }) => {
  for (const path of ["/sign-in", "/api/health", "/api/projects"]) {
    const headers = (await request.get(path)).headers();
    expect(headers["x-content-type-options"], path).toBe("nosniff");
    expect(headers["content-security-policy"], path).toContain("frame-ancestors 'none'");
    expect(headers["referrer-policy"], path).toBe("same-origin");
    expect(headers["x-powered-by"], path).toBeUndefined();
  }
});
