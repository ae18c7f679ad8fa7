import { createHash } from "node:crypto";
import { readFile } from "node:fs/promises";
import path from "node:path";
import { expect, test, type Page } from "@playwright/test";
import type { Manifest } from "@/lib/handover/manifest-types";
import { getManifest } from "./support/manifest";
import { LEAD, signInByPage } from "./support/people";
import { dropFromDisk } from "./support/drop";
import { getShoot } from "./support/shoot";
import { listFiles } from "./support/uploads";

/** The job as a person does it: a project, a folder dropped, progress, the board, and a manifest that says the same. */
test("a dropped folder becomes a sorted board and a manifest that agrees with it", async ({ page }) => {
  const { folder, truth } = await getShoot();
  await signInByPage(page, LEAD);
  await makeProjectByPage(page, "Slope above the lake");

  await page.getByRole("link", { name: /Bring in/ }).click();
  await expect(page).toHaveURL(/\/intake$/);
  const dropZone = page.getByText("Drop files or whole folders here");
  await dropFromDisk(page, dropZone, [folder]);
  await expect(page.getByRole("progressbar", { name: "All files" })).toBeVisible();
  await expect(page.getByText("Everything is in")).toBeVisible({ timeout: 120_000 });
  await expect(page.getByText(`${truth.frames.length} files sent from here`)).toBeVisible();

  await page.getByRole("link", { name: /^(2 )?Board/ }).click();
  await expect(page).toHaveURL(/\/board/);
  await expect(page.getByRole("button", { name: /^Tile A1, / })).toBeVisible({ timeout: 120_000 });
  for (const stack of truth.stacks) {
    const name = `Tile ${"ABC"[stack.row - 1]}${stack.column}, ${stack.files.length} of ${stack.files.length} frames in use`;
    await expect(page.getByRole("button", { name: new RegExp(`^${name}`) })).toBeVisible();
  }
  await page.getByRole("button", { name: /^Tile B2, / }).click();
  await expect(page.getByRole("region", { name: "Frames of B2" })).toBeVisible();

  const projectId = /projects\/([^/]+)\//.exec(page.url())?.[1] ?? "";
  const manifest = await getManifest(page.request, projectId);
  expect([manifest.grid.rows, manifest.grid.columns]).toEqual([truth.rows, truth.columns]);
  await expectTruth(manifest, folder);
  for (const { tile, frames, inUse } of manifest.stacks) {
    await expect(
      page.getByRole("button", { name: new RegExp(`^Tile ${tile}, ${inUse} of ${frames} frames in use`) }),
    ).toBeVisible();
  }
});

async function makeProjectByPage(page: Page, name: string): Promise<void> {
  await page
    .getByRole("link", { name: /New project|Make.*project/i })
    .first()
    .click();
  await page.getByLabel("Name").fill(name);
  await page.getByRole("button", { name: /Make the project|Make it|Create/i }).click();
  await expect(page).toHaveURL(/\/projects\/[^/]+\/?(intake|board)?$/);
  await expect(page.getByText(name).first()).toBeVisible();
}

/** Every file of the shoot is in the manifest with its checksum, in the stack and at the place where it was taken. */
async function expectTruth(manifest: Manifest, folder: string): Promise<void> {
  const { truth } = await getShoot();
  const sent = new Map(manifest.frames.flatMap((frame) => frame.files.map((file) => [file.name, { frame, file }])));
  for (const name of await listFiles(folder)) {
    const entry = sent.get(path.basename(name));
    const sha256 = createHash("sha256")
      .update(await readFile(path.join(folder, name)))
      .digest("hex");
    expect(entry?.file.sha256, name).toBe(sha256);
    const taken = truth.frames.find(({ file }) => path.basename(file) === path.basename(name));
    expect([entry?.frame.row, entry?.frame.column], name).toEqual([taken?.row, taken?.column]);
  }
}
