import type { Locator, Page } from "@playwright/test";

/**
 * Drops files or whole folders from the disk on a part of the page, as a person does from their file manager: the
 * browser itself reads the disk, folders inside folders included.
 * @param paths absolute
 */
export async function dropFromDisk(page: Page, target: Locator, paths: readonly string[]): Promise<void> {
  await target.scrollIntoViewIfNeeded();
  const box = await target.boundingBox();
  if (!box) throw new Error("there is nothing to drop on");
  const devTools = await page.context().newCDPSession(page);
  const place = { x: box.x + box.width / 2, y: box.y + Math.min(box.height / 2, 40) };
  // Operation 1: copy.
  const data = { items: [], files: [...paths], dragOperationsMask: 1 };
  for (const type of ["dragEnter", "dragOver", "drop"] as const) {
    await devTools.send("Input.dispatchDragEvent", { type, ...place, data });
  }
  await devTools.detach();
}
