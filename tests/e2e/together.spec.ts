import { randomUUID } from "node:crypto";
import AxeBuilder from "@axe-core/playwright";
import { expect, test, type APIRequestContext, type Browser, type Page } from "@playwright/test";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { tileName } from "@/lib/board/tile-name";
import { LEAD, inventPerson, signInByHttp, type Person } from "./support/people";
import { addAccount, addMember } from "./support/server";
import { getShoot } from "./support/shoot";
import { makeProject, sendFolder, waitUntilSorted } from "./support/uploads";

/** One project for all: the tests run one after another, each leaves the frames it moved where it found them. */
let projectId: string;
const mona = inventPerson("Mona Vale");
const jonas = inventPerson("Jonas Kepp");
const wim = inventPerson("Wim Ostrand");

test.describe.configure({ mode: "serial" });
test.setTimeout(240_000);

test.beforeAll(async ({ playwright, baseURL }) => {
  const request = await playwright.request.newContext({ baseURL });
  await signInByHttp(request, LEAD);
  projectId = await makeProject(request, "Worked on together");
  await sendFolder(request, projectId, (await getShoot()).folder);
  await waitUntilSorted(request, projectId);
  for (const [person, role] of [
    [mona, "editor"],
    [jonas, "editor"],
    [wim, "viewer"],
  ] as const) {
    await addAccount(person);
    await addMember(projectId, person, role);
  }
  await request.dispose();
});

async function openBoard(browser: Browser, person: Person): Promise<Page> {
  const page = await (await browser.newContext({ viewport: { width: 1440, height: 900 } })).newPage();
  await signInByHttp(page.request, person);
  await page.goto(`/projects/${projectId}/board`);
  await expect(page.getByRole("button", { name: /^Tile A1, / })).toBeVisible();
  return page;
}

async function readBoard(request: APIRequestContext): Promise<Board> {
  return (await request.get(`/api/projects/${projectId}/board`)).json();
}

/** What the page itself sends, from outside of it. */
async function give(request: APIRequestContext, draft: CommandDraft) {
  const { revision } = await readBoard(request);
  return request.post(`/api/projects/${projectId}/commands`, { data: { ...draft, id: randomUUID(), revision } });
}

/** A frame of a tile that is not its reference, and the stack of another tile. */
async function pick(request: APIRequestContext, from: string, to: string) {
  const board = await readBoard(request);
  const at = (name: string) => {
    const stack = board.stacks.find(
      ({ row, column }) => row !== null && column !== null && tileName(row, column) === name,
    );
    if (!stack) throw new Error(`no tile ${name}`);
    return stack;
  };
  const frame = board.frames.find(({ id, stackId }) => stackId === at(from).id && id !== at(from).referenceId);
  if (!frame) throw new Error(`no frame in ${from}`);
  const move = (stackId: string): CommandDraft => ({
    type: "move-frames",
    frameIds: [frame.id],
    to: { kind: "stack", stackId },
  });
  return { frame, there: move(at(to).id), back: move(at(from).id), fromId: at(from).id, toId: at(to).id };
}

const tileWith = (page: Page, name: string, frames: number) =>
  page.getByRole("button", { name: new RegExp(`^Tile ${name}, \\d+ of ${frames} frames`) });

async function expectAccessible(page: Page, state: string): Promise<void> {
  for (const colorScheme of ["light", "dark"] as const) {
    await page.emulateMedia({ colorScheme, reducedMotion: "reduce" });
    const { violations } = await new AxeBuilder({ page }).analyze();
    const serious = violations.filter(({ impact }) => impact === "serious" || impact === "critical");
    const told = serious.map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(" ")).join(", ")}`);
    expect.soft(told, `${state}, ${colorScheme}`).toEqual([]);
  }
}

test("one's own steps are undone and done again, by button and by key, also after a reload", async ({ browser }) => {
  const page = await openBoard(browser, mona);
  const { frame, there } = await pick(page.request, "A1", "A2");
  expect((await give(page.request, there)).status()).toBe(200);
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  await page.reload();
  const undo = page.getByRole("button", { name: "Undo" });
  await expect(undo).toHaveAccessibleDescription(`Undo: moved ${frame.name} from A1 to A2`);
  await undo.click();
  await expect(tileWith(page, "A2", 6)).toBeVisible();
  await expect(page.getByText(/^All changes saved \d\d:\d\d:\d\d$/)).toBeVisible();
  await page.reload();
  await expect(page.getByRole("button", { name: "Redo" })).toHaveAccessibleDescription(/^Redo: /);
  await page.keyboard.press("Control+Shift+z");
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  // In a text field the keys are the field's own.
  await page.getByRole("combobox", { name: "Find a frame" }).fill("x");
  await page.keyboard.press("Control+z");
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  await page.getByRole("combobox", { name: "Find a frame" }).press("Escape");
  await page.getByRole("button", { name: "Undo" }).focus();
  await page.keyboard.press("Control+z");
  await expect(tileWith(page, "A2", 6)).toBeVisible();
  await expect(tileWith(page, "A1", 6)).toBeVisible();
  await page.context().close();
});

test("two people see who is here, on which tile, and each other's changes within a second", async ({ browser }) => {
  const page = await openBoard(browser, mona);
  const other = await openBoard(browser, jonas);
  await expect(page.getByText("Jonas Kepp is here", { exact: true })).toBeVisible();
  await other.getByRole("button", { name: /^Tile B2, / }).click();
  await expect(page.getByRole("button", { name: /^Tile B2, / }).getByText("Jonas Kepp")).toBeVisible();
  await expectAccessible(page, "somebody on a tile");

  const { frame, there, back } = await pick(page.request, "A1", "A2");
  const times: number[] = [];
  for (let round = 0; round < 10; round += 1) {
    const isThere = round % 2 === 0;
    const seen = whenShown(page, `Tile A2, ${isThere ? 7 : 6} of`);
    const startedAtMs = Date.now();
    expect((await give(other.request, isThere ? there : back)).status()).toBe(200);
    times.push((await seen) - startedAtMs);
    if (round === 0) await expect(page.getByText(`Jonas Kepp moved ${frame.name} from A1 to A2`).first()).toBeVisible();
  }
  times.sort((a, b) => a - b);
  console.log(`to a second browser's screen, ms, from before the command is sent: ${times.join(" ")}`);
  // The issue: within a second.
  expect(times[Math.floor(times.length / 2)]).toBeLessThan(1_000);
  await page.context().close();
  await other.context().close();
});

/** When a tile's name says so, by the clock that this test reads too. */
function whenShown(page: Page, name: string): Promise<number> {
  return page.evaluate(
    (wanted) =>
      new Promise<number>((resolve) => {
        const look = () => {
          if (!document.querySelector(`[aria-label^="${wanted}"]`)) return;
          observer.disconnect();
          requestAnimationFrame(() => resolve(Date.now()));
        };
        const observer = new MutationObserver(look);
        observer.observe(document.body, { subtree: true, childList: true, attributes: true });
        look();
      }),
    name,
  );
}

test("without a connection changes wait on the computer, outlive a reload, and are sent when it is back", async ({
  browser,
}) => {
  const page = await openBoard(browser, mona);
  const { there, back } = await pick(page.request, "A1", "A2");
  expect((await give(page.request, there)).status()).toBe(200);
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  await expect(page.getByRole("button", { name: "Undo" })).toHaveAccessibleDescription(/^Undo: moved/);
  await page.context().setOffline(true);
  await page.keyboard.press("Control+z");
  await expect(
    page.getByText("No connection. 1 change waits on this computer and is sent when it is back."),
  ).toBeVisible();
  await expect(page.getByText("1 change waits", { exact: true })).toBeVisible();
  await expectAccessible(page, "offline");
  const kept = await page.evaluate(() =>
    Object.keys(localStorage).filter((key) => key.startsWith("stackyard-waiting/")),
  );
  expect(kept).toHaveLength(1);
  await page.context().setOffline(false);
  await expect(tileWith(page, "A2", 6)).toBeVisible();
  await expect(page.getByText(/^All changes saved \d\d:\d\d:\d\d$/)).toBeVisible();
  expect(await page.evaluate(() => localStorage.length)).toBe(0);

  // A window that is closed while something waits: what it kept is sent by the next one.
  await page.route("**/commands", (route) => route.abort());
  await page.keyboard.press("Control+Shift+z");
  await expect(page.getByText(/^No connection\. 1 change waits/)).toBeVisible();
  page.on("dialog", (dialog) => void dialog.accept());
  await page.unroute("**/commands");
  await page.reload();
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  expect((await give(page.request, back)).status()).toBe(200);
  await page.context().close();
});

test("a change that rests on what is no longer so is explained with both states, and done again on request", async ({
  browser,
}) => {
  const page = await openBoard(browser, mona);
  const { frame, there, back, fromId, toId } = await pick(page.request, "A1", "A2");
  // As a window left it behind that closed without a connection: the frame was in A1 then.
  const userId = await page.evaluate(async (id) => {
    const answer = await fetch(`/api/projects/${id}/presence`);
    const { people }: { people: { userId: string; name: string }[] } = await answer.json();
    return people.find(({ name }) => name === "Mona Vale")?.userId ?? "";
  }, projectId);
  const id = randomUUID();
  const left = {
    command: { ...there, id, revision: 1, expect: { [frame.id]: fromId } },
    sentence: `moved ${frame.name} from A1 to A2`,
    seen: { [frame.id]: `${frame.name} is in A1` },
    givenAtMs: Date.now(),
  };
  const jonasPage = await openBoard(browser, jonas);
  const away = await pick(jonasPage.request, "A1", "A3");
  expect(away.frame.id).toBe(frame.id);
  expect((await give(jonasPage.request, away.there)).status()).toBe(200);
  await page.evaluate(([key, value]) => localStorage.setItem(key, value), [
    `stackyard-waiting/${userId}/${projectId}/${id}`,
    JSON.stringify(left),
  ] as const);
  await page.reload();
  const dialog = page.getByRole("dialog", { name: "This has changed meanwhile" });
  await expect(dialog).toContainText(`Moved ${frame.name} from A1 to A2`);
  await expect(dialog).toContainText(`${frame.name} is in A1`);
  await expect(dialog).toContainText(`${frame.name} is in A3`);
  await expect(dialog).toContainText("Jonas Kepp");
  await expectAccessible(page, "a conflict");
  await dialog.getByRole("button", { name: "Do it again" }).click();
  await expect(dialog).toBeHidden();
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  await expect
    .poll(async () => (await readBoard(page.request)).frames.find(({ id: each }) => each === frame.id)?.stackId)
    .toBe(toId);

  // An undo that somebody else's later step is in the way of says whose and what.
  expect((await give(jonasPage.request, away.there)).status()).toBe(200);
  await expect(tileWith(page, "A3", 7)).toBeVisible();
  await page.getByRole("button", { name: "Undo" }).click();
  const refused = page.getByRole("dialog", { name: "This cannot be undone" });
  await expect(refused).toContainText(/Jonas Kepp moved .* to A3/);
  await refused.getByRole("button", { name: "Close" }).click();
  await expect(refused).toBeHidden();
  expect((await give(page.request, back)).status()).toBe(200);
  await page.context().close();
  await jonasPage.context().close();
});

test("a frame is found by its number, and its tile opens with the focus on it", async ({ browser }) => {
  const page = await openBoard(browser, mona);
  const { frame } = await pick(page.request, "C2", "A1");
  const field = page.getByRole("combobox", { name: "Find a frame" });
  await field.fill(frame.name.toLowerCase());
  await expect(page.getByRole("option", { name: new RegExp(`^${frame.name}`) })).toBeVisible();
  await expectAccessible(page, "frames found");
  await field.press("Enter");
  await expect(page.getByRole("region", { name: "Frames of C2" })).toBeVisible();
  await expect(page.locator(`[data-frame="${frame.id}"] :focus, [data-frame="${frame.id}"]:focus`)).toBeVisible();
  await page.getByRole("button", { name: "Sort again" }).click();
  const dialog = page.getByRole("dialog", { name: "Sort the frames again?" });
  await expect(dialog).toContainText("Everything that a person placed, set aside or settled stays as it is.");
  await expectAccessible(page, "sort anew");
  await dialog.getByRole("button", { name: "Keep it as it is" }).click();
  await page.context().close();
});

test("a viewer sees the changes and no controls, and is refused by the server", async ({ browser }) => {
  const page = await openBoard(browser, wim);
  await expect(page.getByRole("button", { name: "Undo" })).toHaveCount(0);
  await expect(page.getByRole("button", { name: "Sort again" })).toHaveCount(0);
  await expect(page.getByText(/^All changes saved/)).toHaveCount(0);
  const { there } = await pick(page.request, "A1", "A2");
  expect((await give(page.request, there)).status()).toBe(403);
  const other = await openBoard(browser, jonas);
  const { there: move, back } = await pick(other.request, "A1", "A2");
  expect((await give(other.request, move)).status()).toBe(200);
  await expect(tileWith(page, "A2", 7)).toBeVisible();
  expect((await give(other.request, back)).status()).toBe(200);
  await page.goto(`/projects/${projectId}/record`);
  await expect(page.getByRole("list", { name: "Steps, the newest first" })).toContainText("Jonas Kepp moved");
  await expect(page.getByRole("button", { name: /^Undo back to here/ })).toHaveCount(0);
  await page.context().close();
  await other.context().close();
});

test("the change record tells steps in words, by person and tile, and goes back to any of them", async ({
  browser,
}) => {
  const page = await openBoard(browser, mona);
  await page.getByRole("link", { name: "Change record" }).click();
  const steps = page.getByRole("list", { name: "Steps, the newest first" });
  // The worker's steps (measured again) come between people's.
  const step = (text: string | RegExp) => steps.getByRole("listitem").filter({ hasText: text }).first();
  await expect(step(/Jonas Kepp moved .* from A2 to A1/)).toBeVisible();
  for (const width of [1440, 390]) {
    await page.setViewportSize({ width, height: 844 });
    await expectAccessible(page, `the record, ${width} px`);
    const overflowPx = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
    expect(overflowPx, `${width} px`).toBeLessThanOrEqual(0);
  }
  await page.getByLabel("Person").selectOption({ label: "Mona Vale" });
  await expect(page).toHaveURL(/[?&]person=/);
  await expect(steps).not.toContainText("Jonas Kepp");
  await page.getByLabel("Tile").fill("a3");
  await page.getByRole("button", { name: "Show", exact: true }).click();
  await expect(page).toHaveURL(/[?&]tile=A3/);
  await page.reload();
  await expect(page.getByLabel("Tile")).toHaveValue("A3");
  await expect(steps).toContainText("A3");
  await page.getByRole("button", { name: "Show all steps" }).click();
  await expect(page).toHaveURL(/record$/);

  const before = await readBoard(page.request);
  const { there } = await pick(page.request, "A1", "A2");
  const second = await pick(page.request, "B1", "B2");
  expect((await give(page.request, there)).status()).toBe(200);
  expect((await give(page.request, second.there)).status()).toBe(200);
  await expect(step("from B1 to B2")).toBeVisible();
  await step(/Jonas Kepp moved .* from A2 to A1/)
    .getByRole("button", { name: /^Undo back to here/ })
    .click();
  const dialog = page.getByRole("dialog", { name: "Undo back to here?" });
  await expect(dialog).toContainText(/\d+ steps are undone: .*2 of Mona Vale/);
  await expectAccessible(page, "undo back to here");
  await dialog.getByRole("button", { name: "Undo back to here" }).click();
  await expect(dialog).toBeHidden();
  await expect(step(/Mona Vale undid \d+ steps/)).toBeVisible();
  const places = ({ frames }: Board) => frames.map(({ id, stackId }) => [id, stackId]);
  expect(places(await readBoard(page.request))).toEqual(places(before));
  await page.context().close();
});
