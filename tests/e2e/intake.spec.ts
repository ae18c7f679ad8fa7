import { copyFile, mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { expect, test } from "@playwright/test";
import { LEAD, inventPerson, signInByHttp } from "./support/people";
import { dropFromDisk } from "./support/drop";
import { getManifest } from "./support/manifest";
import { addAccount, addMember, endSessionsOf } from "./support/server";
import { getShoot } from "./support/shoot";
import { listFiles, makeProject, readProgress, sendFile, waitUntilSorted } from "./support/uploads";

let folder = "";

test.beforeEach(async () => {
  folder = await mkdtemp(path.join(tmpdir(), "stackyard-drop-"));
});

test.afterEach(async () => {
  await rm(folder, { recursive: true, force: true });
});

test("a copy, a text named .jpg and an empty file are told apart in plain words and stop nothing", async ({ page }) => {
  const shoot = await getShoot();
  const [first = "", second = ""] = await listFiles(shoot.folder);
  await copyFile(path.join(shoot.folder, first), path.join(folder, "first.jpg"));
  await copyFile(path.join(shoot.folder, first), path.join(folder, "the same again.jpg"));
  await copyFile(path.join(shoot.folder, second), path.join(folder, "zweites «Bild» 🌊.jpg"));
  await writeFile(path.join(folder, "letter.jpg"), "Dear reader, this is no picture.");
  await writeFile(path.join(folder, "empty.jpg"), "");

  await signInByHttp(page.request, LEAD);
  const projectId = await makeProject(page.request, "Odds and ends");
  await page.goto(`/projects/${projectId}/intake`);
  await dropFromDisk(page, page.getByText("Drop files or whole folders here"), [folder]);
  await expect.poll(async () => (await readProgress(page.request, projectId)).received).toBeGreaterThanOrEqual(4);
  const progress = await waitUntilSorted(page.request, projectId);
  expect(progress.analysed + progress.failed).toBe(progress.received);
  await page.reload();

  const main = page.getByRole("main");
  await expect(main).toContainText("letter.jpg");
  await expect(main).toContainText(/not a (readable )?picture|no picture|cannot be read|not.*picture/i);
  await expect(main).toContainText(/same|duplicate|copy/i);
  const manifest = await getManifest(page.request, projectId);
  expect(manifest.duplicates).toHaveLength(1);
  expect(manifest.unreadable.map(({ name }) => name)).toContain("letter.jpg");
  const names = manifest.frames.flatMap(({ files }) => files.map(({ name }) => name));
  expect(names).toContain("zweites «Bild» 🌊.jpg");
});

test("a session that ends pauses the uploads; after signing in again they go on", async ({ page }) => {
  const person = inventPerson("Ulla Bremer");
  await addAccount(person);
  await signInByHttp(page.request, person);
  const projectId = await makeProject(page.request, "Interrupted");
  const shoot = await getShoot();
  const files = (await listFiles(shoot.folder)).map((name) => path.join(shoot.folder, name));

  await page.goto(`/projects/${projectId}/intake`);
  // Slow enough that the session ends in the middle: 400 kB a second both ways.
  const devTools = await page.context().newCDPSession(page);
  const slow = { offline: false, latency: 20, downloadThroughput: 400_000, uploadThroughput: 400_000 };
  await devTools.send("Network.enable");
  await devTools.send("Network.emulateNetworkConditions", slow);
  await dropFromDisk(page, page.getByText("Drop files or whole folders here"), files);
  await expect.poll(async () => (await readProgress(page.request, projectId)).received).toBeGreaterThan(1);
  await endSessionsOf(person);
  await expect(page.getByRole("link", { name: /Sign in again/ })).toBeVisible({ timeout: 30_000 });
  await devTools.send("Network.emulateNetworkConditions", { ...slow, downloadThroughput: -1, uploadThroughput: -1 });

  await signInByHttp(page.request, person);
  expect((await readProgress(page.request, projectId)).received).toBeLessThan(files.length);
  await page.getByRole("button", { name: "Go on" }).click();
  await expect(page.getByText("Everything is in")).toBeVisible({ timeout: 60_000 });
  expect((await readProgress(page.request, projectId)).received).toBe(files.length);
});

test("a viewer sees what came in and the board, and can bring nothing in", async ({ page, playwright, baseURL }) => {
  const lead = await playwright.request.newContext({ baseURL });
  await signInByHttp(lead, LEAD);
  const projectId = await makeProject(lead, "Seen only");
  const shoot = await getShoot();
  const [first = ""] = await listFiles(shoot.folder);
  await sendFile(lead, { projectId, name: "ONE.jpg", bytes: await readFile(path.join(shoot.folder, first)) });
  await waitUntilSorted(lead, projectId);
  await lead.dispose();
  const viewer = inventPerson("Vera Oldman");
  await addAccount(viewer);
  await addMember(projectId, viewer, "viewer");

  await signInByHttp(page.request, viewer);
  await page.goto(`/projects/${projectId}/intake`);
  await expect(page.getByText("ONE.jpg").first()).toBeVisible();
  await expect(page.getByText("Drop files or whole folders here")).toHaveCount(0);
  await expect(page.getByRole("link", { name: "Settings" })).toHaveCount(0);
  await page.goto(`/projects/${projectId}/board`);
  await expect(page.getByRole("button", { name: /^Tile A1, / })).toBeVisible();
  expect((await page.goto(`/projects/${projectId}/settings`))?.status()).toBe(403);
});
