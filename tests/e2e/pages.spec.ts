import { expect, test, type Page } from "@playwright/test";
import { findSerious } from "./support/axe";
import { LEAD, inventPerson, signInByHttp } from "./support/people";
import { addAccount } from "./support/server";
import { getShoot } from "./support/shoot";
import { makeProject, sendFile, sendFolder, waitUntilSorted } from "./support/uploads";

const SIZES = [
  { name: "wide", width: 1440, height: 900 },
  { name: "narrow", width: 390, height: 844 },
] as const;
const SCHEMES = ["light", "dark"] as const;

/** Looks at one page in both schemes and at both sizes. */
async function expectAccessible(page: Page, address: string, settled: (page: Page) => Promise<void>): Promise<void> {
  for (const size of SIZES) {
    await page.setViewportSize(size);
    await page.goto(address);
    await settled(page);
    for (const colorScheme of SCHEMES) {
      await page.emulateMedia({ colorScheme, reducedMotion: "reduce" });
      expect.soft(await findSerious(page), `${address}, ${colorScheme}, ${size.name}`).toEqual([]);
      const overflowPx = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      expect.soft(overflowPx, `${address} scrolls sideways, ${size.name}`).toBeLessThanOrEqual(0);
    }
  }
}

const headingShown = async (page: Page) => {
  await expect(page.getByRole("heading", { level: 1 })).toBeVisible();
};

test("sign-in and the page that is not there are accessible", async ({ page }) => {
  await expectAccessible(page, "/sign-in", headingShown);
  await expectAccessible(page, "/nowhere/at/all", headingShown);
});

test("an empty list of projects, a new project and the account page are accessible", async ({ page }) => {
  const person = inventPerson("Nia Ferrant");
  await addAccount(person);
  await signInByHttp(page.request, person);
  await expectAccessible(page, "/projects", headingShown);
  await expectAccessible(page, "/projects/new", headingShown);
  await expectAccessible(page, "/account", headingShown);
});

test("every page of an empty project is accessible", async ({ page }) => {
  await signInByHttp(page.request, LEAD);
  const projectId = await makeProject(page.request, "Nothing yet");
  await expectAccessible(page, `/projects/${projectId}/intake`, headingShown);
  await expectAccessible(page, `/projects/${projectId}/board`, headingShown);
  await expectAccessible(page, `/projects/${projectId}/record`, headingShown);
  await expectAccessible(page, `/projects/${projectId}/settings`, headingShown);
  await expectAccessible(page, "/projects", headingShown);
});

test("intake and board with frames, an open tile and a refused file are accessible", async ({ page }) => {
  test.setTimeout(300_000);
  await signInByHttp(page.request, LEAD);
  const projectId = await makeProject(page.request, "Well filled");
  await sendFolder(page.request, projectId, (await getShoot()).folder);
  await sendFile(page.request, {
    projectId,
    name: "letter.jpg",
    bytes: Buffer.from("Dear reader, this is no picture."),
  });
  await waitUntilSorted(page.request, projectId);
  await expectAccessible(page, `/projects/${projectId}/intake`, async () => {
    await expect(page.getByText("letter.jpg").first()).toBeVisible();
  });
  await expectAccessible(page, `/projects/${projectId}/board`, async () => {
    await expect(page.getByRole("main")).toContainText("A1");
  });
  await page.setViewportSize(SIZES[0]);
  for (const colorScheme of SCHEMES) {
    await page.emulateMedia({ colorScheme });
    await page.goto(`/projects/${projectId}/board`);
    await page.getByRole("button", { name: /^Tile B2, / }).click();
    await expect(page.getByRole("region", { name: "Frames of B2" })).toBeVisible();
    expect.soft(await findSerious(page), `the bench, ${colorScheme}`).toEqual([]);
    await page.getByRole("button", { name: "Table" }).click();
    await expect(page.getByRole("table")).toBeVisible();
    expect.soft(await findSerious(page), `the table, ${colorScheme}`).toEqual([]);
  }
});
