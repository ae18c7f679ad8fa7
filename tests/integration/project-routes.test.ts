import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, beforeAll, beforeEach, describe, expect, test } from "vitest";
import { useDatabase } from "../support/database";
import { addMember, makePerson, makeProject, type Person, signInAs, signOut } from "../support/people";
import { generateShoot } from "../support/shoots/generate-shoot";
import { uploadFile } from "../support/uploads";
import { GET as getBoardRoute } from "@/app/api/projects/[projectId]/board/route";
import { GET as getEvents } from "@/app/api/projects/[projectId]/events/route";
import { GET as getFiles } from "@/app/api/projects/[projectId]/files/route";
import { GET as getCrop } from "@/app/api/projects/[projectId]/frames/[frameId]/crop/route";
import { GET as getPreview } from "@/app/api/projects/[projectId]/frames/[frameId]/preview/route";
import { GET as getThumbnail } from "@/app/api/projects/[projectId]/frames/[frameId]/thumbnail/route";
import { GET as getCsv } from "@/app/api/projects/[projectId]/manifest.csv/route";
import { GET as getManifest } from "@/app/api/projects/[projectId]/manifest/route";
import { GET as getProgressRoute } from "@/app/api/projects/[projectId]/progress/route";
import { accessForJob } from "@/lib/auth/gate";
import { getBoard } from "@/lib/board/reads";
import { boardSinceSchema } from "@/lib/board/command-answers";
import { boardSchema } from "@/lib/board/schema";
import { intakeListSchema, progressSchema } from "@/lib/frames/schema";
import { createAnalysisPool } from "@/lib/imaging/analysis-pool";
import type { ProjectId } from "@/lib/ids";
import { createAnalyseFileHandler } from "@/lib/jobs/handlers/analyse-file";
import { createSortProjectHandler } from "@/lib/jobs/handlers/sort-project";
import { claimJob, type JobKind } from "@/lib/jobs/queue";
import { sortFrames } from "@/lib/sorting/sort-frames";
import { prepareStorage } from "@/lib/storage/paths";

useDatabase();
const SIZE = { widthPx: 750, heightPx: 500 };
const pool = createAnalysisPool({ size: 1 });
let shootDir = "";
let files: readonly string[] = [];
let lead: Person;
let projectId: ProjectId;
let frameId: string;

beforeAll(async () => {
  shootDir = mkdtempSync(path.join(tmpdir(), "stackyard-shoot-"));
  const shoot = await generateShoot("single-tile", 2, shootDir, SIZE);
  files = shoot.frames.slice(0, 2).map(({ file }) => path.join(shootDir, file));
}, 120_000);
afterAll(async () => {
  await pool.close();
  rmSync(shootDir, { recursive: true });
});

beforeEach(async () => {
  await prepareStorage();
  lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead, 'Hafen "Öst"');
  await signInAs(lead);
  for (const file of files) await uploadFile(projectId, path.basename(file), readFileSync(file));
  await runAll("analyse-file");
  await runAll("sort-project");
  frameId = (await getBoard(accessForJob({ projectId }))).frames[0]?.id ?? "";
});

/** Does what the worker would, in this process. */
async function runAll(kind: JobKind): Promise<void> {
  const handlers = [createAnalyseFileHandler(pool, 1), createSortProjectHandler(sortFrames)];
  const handler = handlers.find((one) => one.kind === kind);
  const soon = Date.now() + 10_000;
  for (let job = await claimJob(kind, soon); job; job = await claimJob(kind, soon)) {
    expect(await handler?.run(job, new AbortController().signal)).toEqual({ type: "done" });
  }
}

type Route = (request: Request, context: { params: Promise<unknown> }) => Promise<Response>;

function ask(get: Route, query = "", headers: Record<string, string> = {}, params = { projectId, frameId }) {
  return get(new Request(`http://localhost/${query}`, { headers }), { params: Promise.resolve(params) });
}

const ROUTES: readonly [string, Route, string][] = [
  ["progress", getProgressRoute, ""],
  ["files", getFiles, ""],
  ["board", getBoardRoute, ""],
  ["manifest", getManifest, ""],
  ["manifest.csv", getCsv, ""],
  ["thumbnail", getThumbnail, ""],
  ["preview", getPreview, ""],
  ["crop", getCrop, "?x=0&y=0&w=10&h=10"],
  ["events", getEvents, ""],
];

test.each(ROUTES)(
  "%s: every member may look; strangers find nothing, nobody must sign in",
  async (_name, get, query) => {
    const [editor, viewer] = [await makePerson("Ed"), await makePerson("Vi")];
    await addMember(projectId, editor, "editor");
    await addMember(projectId, viewer, "viewer");
    const stranger = await makePerson("Stran");
    const administrator = await makePerson("Ada", { isAdministrator: true });
    const statuses: number[] = [];
    for (const person of [lead, editor, viewer, stranger, administrator, null]) {
      if (person) await signInAs(person);
      else signOut();
      const answer = await ask(get, query);
      statuses.push(answer.status);
      if (answer.status === 200) await answer.body?.cancel();
      else expect(answer.headers.get("content-type")).toBe("application/problem+json");
    }
    expect(statuses).toEqual([200, 200, 200, 404, 404, 401]);
  },
);

test.each(ROUTES.filter(([name]) => ["thumbnail", "preview", "crop"].includes(name)))(
  "%s: a frame of another project is not found through one's own",
  async (_name, get, query) => {
    const other = await makeProject(lead, "Other");
    expect((await ask(get, query, {}, { projectId: other, frameId })).status).toBe(404);
    expect((await ask(get, query, {}, { projectId, frameId: "../../etc/passwd" })).status).toBe(404);
  },
);

describe("answers", () => {
  test("progress, files and board are what their schemas say", async () => {
    expect(progressSchema.strict().parse(await (await ask(getProgressRoute)).json())).toEqual({
      received: 2,
      analysed: 2,
      failed: 0,
      total: 2,
      sorted: true,
    });
    expect(intakeListSchema.parse(await (await ask(getFiles)).json()).files).toHaveLength(2);
    const board = boardSchema.parse(await (await ask(getBoardRoute)).json());
    expect([board.revision, board.frames.length]).toEqual([1, 2]);
  });

  test("a board that is known already costs no body", async () => {
    const first = await ask(getBoardRoute);
    const etag = first.headers.get("etag") ?? "";
    const since = async (revision: number) =>
      boardSinceSchema.parse(await (await ask(getBoardRoute, `?since=${revision}`)).json());
    expect(await since(1)).toEqual({ unchanged: true, revision: 1 });
    expect(await since(0)).toMatchObject({ full: true, revision: 1 });
    const same = await ask(getBoardRoute, "", { "if-none-match": etag });
    expect([same.status, await same.text()]).toEqual([304, ""]);
    expect((await ask(getBoardRoute, "?since=yesterday")).status).toBe(400);
  });

  test("pictures are kept by the person's own browser, for good", async () => {
    for (const get of [getThumbnail, getPreview]) {
      const answer = await ask(get);
      expect(answer.headers.get("content-type")).toBe("image/jpeg");
      expect(answer.headers.get("cache-control")).toBe("private, max-age=31536000, immutable");
      expect(
        Buffer.from(await answer.arrayBuffer())
          .subarray(0, 3)
          .toString("hex"),
      ).toBe("ffd8ff");
      const known = await ask(get, "", { "if-none-match": answer.headers.get("etag") ?? "" });
      expect(known.status).toBe(304);
    }
  });

  test("a crop must lie inside the frame and within what one crop may have", async () => {
    const { widthPx, heightPx } = SIZE;
    expect((await ask(getCrop, `?x=${widthPx - 10}&y=${heightPx - 10}&w=10&h=10`)).status).toBe(200);
    const refused = [
      `?x=${widthPx - 9}&y=0&w=10&h=10`,
      "?x=-1&y=0&w=10&h=10",
      "?x=0&y=0&w=2049&h=10",
      "?x=0&y=0&w=1.5&h=1",
      "",
    ];
    for (const query of refused) expect((await ask(getCrop, query)).status, query).toBe(400);
  });

  test("the manifest is saved under the project's name, and of a share holds that share", async () => {
    const saved = await ask(getManifest, "?download=1");
    expect(saved.headers.get("content-disposition")).toBe(
      `attachment; filename="Hafen __st_.manifest.json"; filename*=UTF-8''Hafen%20_%C3%96st_.manifest.json`,
    );
    const shares = [`?share=none`, `?share=${lead.id}`, `?share=${lead.email}`];
    const counts = await Promise.all(
      shares.map(async (query) => (await (await ask(getManifest, query)).json()).frames.length),
    );
    expect(counts).toEqual([2, 0, 0]);
    expect((await ask(getManifest, "?share=stranger@example.org")).status).toBe(404);
  });
});
