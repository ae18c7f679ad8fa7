import { beforeEach, expect, test } from "vitest";
import { eq } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, signInAs } from "../support/people";
import { pictureResult } from "../support/analysis-results";
import { uploadFile } from "../support/uploads";
import { database, writeTransaction } from "@/db/client";
import { frames } from "@/db/schema/frames";
import { accessForJob } from "@/lib/auth/gate";
import { getProgress, listIntakeFiles } from "@/lib/frames/reads";
import type { IntakeFile } from "@/lib/frames/schema";
import { type AnalysisResult, recordAnalysis } from "@/lib/frames/writes";
import type { ProjectId } from "@/lib/ids";

// Which of several files with the same bytes stays, whatever order their analyses end in.
useDatabase();
const BYTES = Buffer.from("bytes");
const NOW = 1_750_000_000_000;
let projectId: ProjectId;

beforeEach(async () => {
  const lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead);
  await signInAs(lead);
});

async function bringIn(...names: string[]): Promise<IntakeFile[]> {
  for (const name of names) await uploadFile(projectId, name, BYTES);
  return (await list()).reverse();
}
const list = () => listIntakeFiles(accessForJob({ projectId }));
const record = (file: IntakeFile | undefined, result: AnalysisResult) => {
  if (!file) throw new Error("no such file");
  return recordAnalysis(accessForJob({ projectId }), file.id, result, NOW);
};
async function states() {
  const now = (await list()).reverse();
  return now.map(({ name, state, duplicateOf }) => [name, state, duplicateOf?.name ?? null]);
}

test.each([
  ["in order", [0, 1, 2]],
  ["backwards", [2, 1, 0]],
  ["the middle one first", [1, 2, 0]],
])("the one received first stays: %s", async (_how, order) => {
  const brought = await bringIn("a.jpg", "b.jpg", "c.jpg");
  for (const at of order) await record(brought[at], pictureResult("same"));
  expect(await states()).toEqual([
    ["a.jpg", "analysed", null],
    ["b.jpg", "duplicate", "a.jpg"],
    ["c.jpg", "duplicate", "a.jpg"],
  ]);
  expect(await database().select({ id: frames.id }).from(frames)).toHaveLength(1);
});

test("analyses that end at once leave one", async () => {
  const brought = await bringIn("a.jpg", "b.jpg", "c.jpg", "d.jpg");
  await Promise.all([...brought].reverse().map((file) => record(file, pictureResult("same"))));
  expect((await states()).filter(([, state]) => state === "analysed")).toEqual([["a.jpg", "analysed", null]]);
});

test("a later file that has its place on the board already keeps it", async () => {
  const [early, late] = await bringIn("a.jpg", "b.jpg");
  await record(late, pictureResult("same"));
  const frameId = late?.frameId;
  if (!frameId) throw new Error("no frame");
  await writeTransaction((tx) => tx.update(frames).set({ orderTaken: 0 }).where(eq(frames.id, frameId)));
  await record(early, pictureResult("same"));
  expect(await states()).toEqual([
    ["a.jpg", "duplicate", "b.jpg"],
    ["b.jpg", "analysed", null],
  ]);
});

test("recording twice changes nothing more", async () => {
  const [only] = await bringIn("a.jpg");
  await record(only, pictureResult("one"));
  const before = await list();
  await record(only, { type: "unreadable", sha256: null, reason: "late news" });
  expect(await list()).toEqual(before);
});

test("the raw file of a picture that fails waits alone, and goes to the next picture of its name", async () => {
  const [broken, raw] = await bringIn("a.jpg", "a.NEF");
  await record(raw, { type: "raw", sha256: "raw", mediaType: "image/x-raw-nef" });
  await record(broken, { type: "unreadable", sha256: "bad", reason: "The file is cut short." });
  expect((await list()).map(({ name, frameId }) => [name, frameId])).toEqual([
    ["a.NEF", null],
    ["a.jpg", null],
  ]);
  const again = (await bringIn("a.jpg")).at(-1);
  await record(again, pictureResult("good"));
  const adopted = (await list()).find(({ name }) => name === "a.NEF");
  expect([adopted?.frameId, adopted?.reason]).toEqual([again?.frameId, null]);
});

test("a file named raw that holds a picture is shown, and one named picture that is raw is kept beside", async () => {
  const [raw, jpeg] = await bringIn("a.NEF", "b.jpg");
  await record(raw, pictureResult("one"));
  await record(jpeg, { type: "raw", sha256: "two", mediaType: "image/x-raw" });
  const now = (await list()).reverse();
  expect(now.map(({ isRaw, frameId }) => [isRaw, frameId !== null])).toEqual([
    [false, true],
    [true, false],
  ]);
  expect(await getProgress(accessForJob({ projectId }))).toMatchObject({ analysed: 1, failed: 1, sorted: false });
});
