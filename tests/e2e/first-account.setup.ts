import { expect, test } from "@playwright/test";
import { LEAD } from "./support/people";

test("the first account is made on the web, signs in at once and can be made only once", async ({ page, browser }) => {
  await page.goto("/");
  await expect(page).toHaveURL(/\/first-account$/);
  await page.getByLabel("Name").fill(LEAD.name);
  await page.getByLabel("E-mail").fill(LEAD.email);
  await page.getByLabel("Password", { exact: true }).fill("short");
  await page.getByRole("button", { name: "Make the account" }).click();
  await expect(page.getByRole("alert").getByText(/this has 5/)).toBeVisible();
  await page.getByLabel("Password", { exact: true }).fill(LEAD.password);
  await page.getByRole("button", { name: "Make the account" }).click();
  await expect(page).toHaveURL(/\/projects$/);

  const stranger = await browser.newPage();
  await stranger.goto("/first-account");
  await expect(stranger).toHaveURL(/\/sign-in/);
  await stranger.close();
});
