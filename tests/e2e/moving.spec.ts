import { expect, test, type APIRequestContext, type Locator, type Page } from "@playwright/test";
import type { Board } from "@/lib/board/model";
import { boardSchema } from "@/lib/board/schema";
import { findSerious } from "./support/axe";
import { inventPerson, LEAD, signInByHttp } from "./support/people";
import { addAccount, addMember } from "./support/server";
import { getShoot } from "./support/shoot";
import { makeProject, sendFolder, waitUntilSorted } from "./support/uploads";

let made: string | null = null;

/** One sorted project for all tests of this file: 3 rows of 4 tiles, 6 frames each. Each test undoes what it did. */
async function openBoard(page: Page, tile?: string): Promise<string> {
  await signInByHttp(page.request, LEAD);
  if (made === null) {
    made = await makeProject(page.request, "Slope above the lake, mended");
    await sendFolder(page.request, made, (await getShoot()).folder);
    await waitUntilSorted(page.request, made);
  }
  await page.goto(`/projects/${made}/board${tile === undefined ? "" : `?tile=${tile}`}`);
  await expect(page.getByRole("button", { name: /^Tile A1, 6 of 6/ })).toBeVisible();
  if (tile !== undefined) await expect(bench(page, tile)).toBeVisible();
  return made;
}

const bench = (page: Page, tile: string) => page.getByRole("region", { name: `Frames of ${tile}`, exact: true });
const tileOf = (page: Page, name: string, frames: number) =>
  page.getByRole("button", { name: new RegExp(`^Tile ${name}, ${frames} of ${frames} frames`) });
const frames = (page: Page, tile: string) => bench(page, tile).getByRole("row");
/** What hangs beside the pointer. */
const paper = (page: Page) => page.locator("[data-carried]");
const undo = (page: Page) => page.getByRole("button", { name: "Undo", exact: true }).click();

async function getBoard(request: APIRequestContext, projectId: string): Promise<Board> {
  return boardSchema.parse(await (await request.get(`/api/projects/${projectId}/board`)).json());
}

/** As the server has it: how many frames the tile's chosen take holds. */
async function expectOnServer(page: Page, projectId: string, counts: Readonly<Record<string, number>>) {
  await expect
    .poll(async () => {
      const board = await getBoard(page.request, projectId);
      return Object.fromEntries(
        Object.keys(counts).map((name) => {
          const row = name.charCodeAt(0) - 64;
          const stack = board.stacks.find((each) => each.row === row && each.column === Number(name.slice(1)));
          return [name, board.frames.filter(({ stackId }) => stackId !== null && stackId === stack?.id).length];
        }),
      );
    })
    .toEqual(counts);
}

async function middleOf(part: Locator, down = 0.5): Promise<{ x: number; y: number }> {
  await part.scrollIntoViewIfNeeded();
  const box = await part.boundingBox();
  if (!box) throw new Error("it is not on the page");
  return { x: box.x + box.width / 2, y: box.y + box.height * down };
}

/** Takes hold of one part and holds it over another, as a hand does: in steps. */
async function hold(page: Page, from: Locator, to: Locator, down = { from: 0.3, to: 0.5 }): Promise<void> {
  const target = await middleOf(to, down.to);
  const start = await middleOf(from, down.from);
  await page.mouse.move(start.x, start.y);
  await page.mouse.down();
  await page.mouse.move(start.x + 8, start.y - 8, { steps: 3 });
  await page.mouse.move(target.x, target.y, { steps: 6 });
}

test("a frame is dragged to a tile, which says before the drop what would happen; and undone", async ({ page }) => {
  const projectId = await openBoard(page, "A2");
  expect.soft(await findSerious(page), "an open bench").toEqual([]);
  await hold(page, frames(page, "A2").nth(1), tileOf(page, "A3", 6));
  await expect(page.getByText("A3 would have 7 frames", { exact: true })).toBeVisible();
  await expect(paper(page).getByText(/It would go from A2 to A3\. A3 would have 7 frames\./)).toBeVisible();
  expect.soft(await findSerious(page), "while dragging a frame").toEqual([]);
  await page.mouse.up();
  await expect(tileOf(page, "A3", 7)).toBeVisible();
  await expectOnServer(page, projectId, { A2: 5, A3: 7 });
  await undo(page);
  await expect(tileOf(page, "A3", 6)).toBeVisible();
  await expectOnServer(page, projectId, { A2: 6, A3: 6 });
});

test("Escape puts back what is dragged, and leaves the bench open", async ({ page }) => {
  await openBoard(page, "A2");
  await hold(page, frames(page, "A2").nth(1), tileOf(page, "A3", 6));
  await page.keyboard.press("Escape");
  await page.mouse.up();
  await expect(tileOf(page, "A3", 6)).toBeVisible();
  await expect(bench(page, "A2")).toBeVisible();
});

test("by keyboard a frame is picked up, moved from tile to tile, put down; and undone", async ({ page }) => {
  const projectId = await openBoard(page, "B2");
  const row = frames(page, "B2").nth(2);
  await row.focus();
  const name = (await row.getAttribute("aria-label"))?.split(",")[0] ?? "";
  await page.keyboard.press("Tab");
  await expect(page.getByRole("button", { name: `Move ${name}` })).toBeFocused();
  await page.keyboard.press("Enter");
  await page.keyboard.press("ArrowUp");
  await page.keyboard.press("ArrowRight");
  await expect(page.getByText(`${name} over A3. It would go from B2 to A3. A3 would have 7 frames.`)).toBeAttached();
  expect.soft(await findSerious(page), "while moving by keyboard").toEqual([]);
  await page.keyboard.press("Escape");
  await expect(page.getByRole("button", { name: `Move ${name}` })).toBeFocused();
  await page.keyboard.press("Space");
  await page.keyboard.press("ArrowRight");
  await page.keyboard.press("Space");
  await expect(tileOf(page, "B3", 7)).toBeFocused();
  await expectOnServer(page, projectId, { B2: 5, B3: 7 });
  await page.keyboard.press("Control+z");
  await expectOnServer(page, projectId, { B2: 6, B3: 6 });
});

test("a stack is dragged to a taken place: one of three answers, each said before the drop", async ({ page }) => {
  const projectId = await openBoard(page);
  const handle = page.getByRole("button", { name: "Move A1", exact: true });
  await hold(page, handle, tileOf(page, "B3", 6), { from: 0.5, to: 0.5 });
  await expect(paper(page).getByText("It would be placed in B3, and B3 in A1.")).toBeVisible();
  expect.soft(await findSerious(page), "while dragging a stack").toEqual([]);
  const box = await tileOf(page, "B3", 6).boundingBox();
  await page.mouse.move((box?.x ?? 0) + (box?.width ?? 0) * 0.9, (box?.y ?? 0) + (box?.height ?? 0) * 0.4, {
    steps: 3,
  });
  await expect(
    paper(page).getByText(/B3 to B4 would go one place to the right\. The grid would reach to column 5\./),
  ).toBeVisible();
  const before = await getBoard(page.request, projectId);
  await page.mouse.up();
  await expect(page.getByRole("group", { name: /^A1 is a hole/ })).toBeVisible();
  const idAt = (board: Board, row: number, column: number) =>
    board.stacks.find((stack) => stack.row === row && stack.column === column)?.id;
  await expect.poll(async () => idAt(await getBoard(page.request, projectId), 2, 3)).toBe(idAt(before, 1, 1));
  expect(idAt(await getBoard(page.request, projectId), 2, 5)).toBe(idAt(before, 2, 4));
  await undo(page);
  await expect.poll(async () => (await getBoard(page.request, projectId)).grid.columns).toBe(4);
  expect(idAt(await getBoard(page.request, projectId), 1, 1)).toBe(idAt(before, 1, 1));
});

test("a frame taken to the edge makes a new place, and the loose cell takes it out", async ({ page }) => {
  const projectId = await openBoard(page, "C2");
  const box = await middleOf(frames(page, "C2").nth(0), 0.3);
  await page.mouse.move(box.x, box.y);
  await page.mouse.down();
  await page.mouse.move(box.x + 10, box.y - 10, { steps: 3 });
  const edge = await page.locator('[data-place="C5"]').boundingBox();
  if (!edge) throw new Error("there is no new place at the edge");
  await page.mouse.move(edge.x + edge.width / 2, edge.y + edge.height / 2, { steps: 6 });
  await expect(paper(page).getByText(/The grid would reach to column 5\./)).toBeVisible();
  const cell = await page.locator('[data-place="loose"]').boundingBox();
  if (!cell) throw new Error("there is no cell for loose frames");
  await page.mouse.move(cell.x + 8, cell.y + 8, { steps: 6 });
  await page.mouse.up();
  await expect(page.getByRole("button", { name: /^1 loose frame: / })).toBeVisible();
  await expectOnServer(page, projectId, { C2: 5 });
  await undo(page);
  await expectOnServer(page, projectId, { C2: 6 });
});

test("the boundary of two brackets is dragged along the rail", async ({ page }) => {
  const projectId = await openBoard(page);
  const board = await getBoard(page.request, projectId);
  const line = page.locator(`[data-line="${board.frames[4]?.id}"]`);
  await hold(page, page.getByRole("button", { name: "Boundary between A1 and A2" }), line, { from: 0.5, to: 0.1 });
  await expect(paper(page).getByText(/They would go from A1 to A2\. A2 would have 8 frames\./)).toBeVisible();
  await page.mouse.up();
  await expectOnServer(page, projectId, { A1: 4, A2: 8 });
  await undo(page);
  await expectOnServer(page, projectId, { A1: 6, A2: 6 });
});

test("many frames are chosen by keys, moved by name as one step, set aside as one step", async ({ page }) => {
  const projectId = await openBoard(page, "A2");
  await frames(page, "A2").nth(1).focus();
  await page.keyboard.press("Shift+ArrowRight");
  await page.keyboard.press("Shift+ArrowRight");
  const bar = page.getByRole("region", { name: "Selected frames" });
  await expect(bar).toContainText("3 frames selected");
  expect.soft(await findSerious(page), "frames selected").toEqual([]);
  await bar.getByRole("button", { name: "Move to…" }).click();
  await page.keyboard.type("b3");
  await expect(page.getByRole("dialog").getByRole("status")).toContainText("They would go from A2 to B3.");
  expect.soft(await findSerious(page), "Move to").toEqual([]);
  await page.keyboard.press("Enter");
  await expectOnServer(page, projectId, { A2: 3, B3: 9 });
  await undo(page);
  await expectOnServer(page, projectId, { A2: 6, B3: 6 });

  await page.getByRole("button", { name: "Select…" }).click();
  expect.soft(await findSerious(page), "the menu of selections").toEqual([]);
  await page.getByRole("menuitem", { name: /^All frames in row B/ }).click();
  await bar.getByRole("button", { name: "Set aside…" }).click();
  await page.getByRole("menuitem", { name: "Set aside as exposure" }).click();
  const setAside = async () =>
    (await getBoard(page.request, projectId)).frames.filter((frame) => frame.setAside === "exposure").length;
  await expect.poll(setAside).toBe(24);
  await undo(page);
  await expect.poll(setAside).toBe(0);
});

test("focus comes back to where a menu or a window was opened", async ({ page }) => {
  await openBoard(page, "A2");
  const menu = frames(page, "A2")
    .nth(0)
    .getByRole("button", { name: /^Actions for/ });
  await menu.click();
  expect.soft(await findSerious(page), "a frame's menu").toEqual([]);
  await page.getByRole("menuitem", { name: "Move to…" }).click();
  await expect(page.getByLabel("Tile or place")).toBeFocused();
  await page.keyboard.press("Escape");
  await expect(menu).toBeFocused();
});

test("a row is added and removed from its letter", async ({ page }) => {
  const projectId = await openBoard(page);
  await page.getByRole("button", { name: "Change row B" }).click();
  await page.getByRole("menuitem", { name: "Add a row above B" }).click();
  await expect(page.getByRole("group", { name: /^B1 is a hole/ })).toBeVisible();
  await expect.poll(async () => (await getBoard(page.request, projectId)).grid.rows).toBe(4);
  await page.getByRole("button", { name: "Change row B" }).click();
  await page.getByRole("menuitem", { name: "Remove row B" }).click();
  await expect.poll(async () => (await getBoard(page.request, projectId)).grid.rows).toBe(3);
});

test("a viewer sees the board, and nothing to change it with", async ({ browser, page }) => {
  const projectId = await openBoard(page);
  const viewer = inventPerson("Pim Vale");
  await addAccount(viewer);
  await addMember(projectId, viewer, "viewer");
  const theirs = await (await browser.newContext()).newPage();
  await signInByHttp(theirs.request, viewer);
  await theirs.goto(`/projects/${projectId}/board?tile=A2`);
  await expect(bench(theirs, "A2").getByRole("listitem")).toHaveCount(6);
  await expect(theirs.getByRole("button", { name: /^(Move|Change|Actions for|Boundary|Select…)/ })).toHaveCount(0);
  await expect(theirs.locator("[data-grip]")).toHaveCount(0);
  await theirs.context().close();
});

test("on a phone a frame is tapped and moved by name, or picked up and put down by taps", async ({ browser, page }) => {
  const projectId = await openBoard(page);
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true });
  const phone = await context.newPage();
  await signInByHttp(phone.request, LEAD);
  await phone.goto(`/projects/${projectId}/board?tile=A2`);
  await frames(phone, "A2")
    .nth(1)
    .tap({ position: { x: 40, y: 40 } });
  const bar = phone.getByRole("region", { name: "Selected frames" });
  await expect(bar).toContainText("1 frame selected");
  expect.soft(await findSerious(phone), "a frame selected on a phone").toEqual([]);
  await bar.getByRole("button", { name: "Move to…" }).tap();
  await phone.getByLabel("Tile or place").fill("A3");
  await phone.getByRole("button", { name: "Move", exact: true }).tap();
  await expectOnServer(phone, projectId, { A2: 5, A3: 7 });
  await frames(phone, "A2")
    .nth(1)
    .tap({ position: { x: 40, y: 40 } });
  await bar.getByRole("button", { name: "Pick up" }).tap();
  // The list of tiles to tap comes by itself.
  const target = phone.getByRole("rowheader", { name: "B1" }).getByRole("button");
  await target.tap();
  await expect(phone.getByRole("region", { name: "Picked up" })).toContainText("B1 would have 7 frames.");
  expect.soft(await findSerious(phone), "picked up on a phone").toEqual([]);
  await phone.getByRole("button", { name: "Move to B1" }).tap();
  await expectOnServer(phone, projectId, { A2: 4, A3: 7, B1: 7 });
  await context.close();
  await page.reload();
  await undo(page);
  await expectOnServer(page, projectId, { A2: 5, B1: 6 });
  await undo(page);
  await expectOnServer(page, projectId, { A2: 6, A3: 6 });
});
