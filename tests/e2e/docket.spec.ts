import { readFile } from "node:fs/promises";
import path from "node:path";
import { expect, test, type APIRequestContext, type Page } from "@playwright/test";
import type { Board, BoardQuestion } from "@/lib/board/model";
import { withPresentNames } from "@/lib/board/present-names";
import { boardSchema } from "@/lib/board/schema";
import { findSerious } from "./support/axe";
import { getManifest } from "./support/manifest";
import { LEAD, signInByHttp } from "./support/people";
import { getShoot } from "./support/shoot";
import { listFiles, makeProject, sendFile, waitUntilSorted } from "./support/uploads";

/** A shoot with much that goes wrong: holes, strays, soft, moved and few frames. */
const SHOOT = ["nasty", 3] as const;
/** Interaction to next paint above which a page is called poor. Source: web.dev/articles/inp, from memory. */
const POOR_MS = 500;

test("the docket of a shoot is worked to zero by keyboard only, and a new sorting leaves the answers alone", async ({
  page,
}) => {
  test.setTimeout(420_000);
  await signInByHttp(page.request, LEAD);
  const projectId = await makeProject(page.request, "Cliff walk, everything asked");
  const { folder } = await getShoot(...SHOOT);
  const files = await listFiles(folder);
  // From the middle of the shoot: the last file is a second copy, and would be no frame.
  const late = files[Math.floor(files.length / 2)] ?? "";
  for (const file of files) if (file !== late) await send(page.request, { projectId, folder, file });
  await waitUntilSorted(page.request, projectId);
  const before = await getBoard(page.request, projectId);
  expect(before.questions.length).toBeGreaterThan(5);
  const kinds = new Set(before.questions.map(({ kind }) => kind));
  for (const kind of ["hole", "stray", "few-frames"] as const) expect(kinds).toContain(kind);

  await page.goto(`/projects/${projectId}/board`);
  await expect(page.getByRole("heading", { name: before.questions[0]?.message })).toBeVisible();
  expect.soft(await findSerious(page), "an open question").toEqual([]);
  await tabTo(page, /^Question 1 of/);
  await tabTo(page, /^Decide later$/);
  await page.keyboard.press("Enter");
  await expect(page.getByText(/question 1 of \d+, 1 put off/)).toBeVisible();
  expect.soft(await findSerious(page), "a question put off").toEqual([]);

  await watchAnswers(page);
  const given: BoardQuestion[] = [];
  while (await page.getByRole("group", { name: /^Question \d+ of/ }).isVisible()) {
    const question = await shownQuestion(page, projectId);
    given.push(question);
    // Right after an answer the next question takes none.
    await expect(page.locator('[aria-label*="open question"] [aria-disabled]')).toHaveCount(0);
    await tabTo(page, new RegExp(`^${escape(labelOf(question))}$`));
    await page.keyboard.press("Enter");
    await expect(page.getByRole("group", { name: /^Question/ })).toBeFocused();
    await expect(page.getByRole("heading", { name: question.message, exact: true })).toBeHidden();
  }
  await expect(page.getByText("No open questions", { exact: true })).toBeVisible();
  expect.soft(await findSerious(page), "no question left").toEqual([]);
  const waits = await page.evaluate(() => window.answerWaitsMs);
  expect(waits).toHaveLength(given.length);
  test.info().annotations.push({ type: "answer to next question, ms", description: waits.map(Math.round).join(" ") });
  console.log(`answer to next question on screen, ms: ${waits.map(Math.round).join(" ")}`);
  expect(Math.max(...waits)).toBeLessThan(POOR_MS);

  await expect.poll(async () => (await getBoard(page.request, projectId)).questions.length).toBe(0);
  const after = await getBoard(page.request, projectId);
  expectAnswered(given, before, after);
  const manifest = await getManifest(page.request, projectId);
  expect(manifest.toSettle).toEqual([]);
  const inManifest = new Map(manifest.frames.map(({ id, stack }) => [id, stack]));
  for (const { id, stackId } of after.frames) expect(inManifest.get(id) ?? null, id).toBe(stackId);

  await send(page.request, { projectId, folder, file: late });
  await waitUntilSorted(page.request, projectId);
  const resorted = await getBoard(page.request, projectId);
  expect(resorted.frames).toHaveLength(after.frames.length + 1);
  expectAnswered(given, before, resorted);
  const answered = new Set(before.questions.map(({ key }) => key));
  expect(resorted.questions.filter(({ key }) => answered.has(key))).toEqual([]);
});

declare global {
  interface Window {
    answerWaitsMs: number[];
  }
}

/** Notes, for each Enter, how long it takes until another question, or none, has been drawn. */
async function watchAnswers(page: Page): Promise<void> {
  await page.evaluate(() => {
    window.answerWaitsMs = [];
    const shown = () => document.querySelector('[aria-label*="open question"] h2')?.textContent ?? "";
    document.addEventListener(
      "keydown",
      ({ key, timeStamp }) => {
        if (key !== "Enter") return;
        const was = shown();
        const look = () => {
          if (shown() === was) requestAnimationFrame(look);
          // One frame later it has been painted.
          else requestAnimationFrame(() => window.answerWaitsMs.push(performance.now() - timeStamp));
        };
        requestAnimationFrame(look);
      },
      true,
    );
  });
}

/** Presses Tab until what is focused has that name, as a person without a pointer would. */
async function tabTo(page: Page, name: RegExp): Promise<void> {
  for (let pressed = 0; pressed < 80; pressed += 1) {
    const focused = await page.evaluate(() => {
      const element = document.activeElement;
      return element?.getAttribute("aria-label") ?? element?.textContent ?? "";
    });
    if (name.test(focused.trim())) return;
    await page.keyboard.press("Tab");
  }
  throw new Error(`Tab does not lead to ${name}`);
}

/** In the words of the board as the server has it: earlier answers may have moved the stacks that it names. */
async function shownQuestion(page: Page, projectId: string): Promise<BoardQuestion> {
  const message = await page
    .getByRole("region", { name: /open question/ })
    .getByRole("heading")
    .textContent();
  let question: BoardQuestion | undefined;
  await expect(async () => {
    const { questions } = await getBoard(page.request, projectId);
    question = questions.find((candidate) => candidate.message === message);
    expect(question, `the docket asks what the board does not: ${message}`).toBeDefined();
  }).toPass({ timeout: 10_000 });
  if (!question) throw new Error("toPass has found it");
  return question;
}

/** What the test answers: the last thing offered, so that frames move as well as stay. */
function answerOf({ answers }: BoardQuestion) {
  return answers.at(-1);
}

function labelOf(question: BoardQuestion): string {
  return answerOf(question)?.label ?? "Keep it as it is";
}

/** Every frame is where the answers, in their order, said, and where it was before otherwise. */
function expectAnswered(given: readonly BoardQuestion[], before: Board, now: Board): void {
  const expected = new Map(before.frames.map(({ id, stackId, setAside }) => [id, { stackId, setAside }]));
  const order = new Map(before.frames.map(({ id, orderTaken }) => [id, orderTaken]));
  const orderOf = (id: string) => order.get(id) ?? 0;
  for (const question of given) {
    const action = answerOf(question)?.action;
    if (action?.type === "split-stack") {
      for (const [id, frame] of expected) {
        const isBehind = frame.stackId === action.stackId && orderOf(id) >= orderOf(action.atFrameId);
        if (isBehind) expected.set(id, { ...frame, stackId: "made" });
      }
    }
    for (const id of action && "frameIds" in action ? action.frameIds : []) {
      const frame = expected.get(id);
      if (!frame || !action) continue;
      if (action.type === "move-frames") expected.set(id, { ...frame, stackId: action.toStackId });
      if (action.type === "new-stack") expected.set(id, { ...frame, stackId: "made" });
      if (action.type === "set-aside") expected.set(id, { ...frame, setAside: action.reason });
      if (action.type === "bring-back") expected.set(id, { ...frame, setAside: null });
    }
  }
  const known = new Set(before.stacks.map(({ id }) => id));
  const found = new Map(
    now.frames.map(({ id, stackId, setAside }) => {
      const isMade = stackId !== null && !known.has(stackId);
      return [id, { stackId: isMade ? "made" : stackId, setAside }];
    }),
  );
  for (const [id, frame] of expected) expect(found.get(id), id).toEqual(frame);
}

async function getBoard(request: APIRequestContext, projectId: string): Promise<Board> {
  const answer = await request.get(`/api/projects/${projectId}/board`);
  expect(answer.status()).toBe(200);
  return withPresentNames(boardSchema.parse(await answer.json()));
}

async function send(
  request: APIRequestContext,
  { projectId, folder, file }: { readonly projectId: string; readonly folder: string; readonly file: string },
): Promise<void> {
  const [name, sub] = [path.posix.basename(file), path.posix.dirname(file)];
  const bytes = await readFile(path.join(folder, file));
  await sendFile(request, { projectId, name, folder: sub === "." ? "" : sub, bytes });
}

function escape(text: string): string {
  return text.replace(/[.*+?^${}()|[\]\\]/g, "\\$&");
}
