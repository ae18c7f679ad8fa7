import "server-only";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { z } from "zod";
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from "@/lib/demo/accounts";
import { callJson, signIn, type HttpSession } from "@/lib/demo/http-session";
import { listDemoProjects, listDemoUploads } from "@/lib/demo/reads";
import { terminateUpload, uploadFile } from "@/lib/demo/upload-file";
import { markDemoProject } from "@/lib/demo/writes";
import { progressSchema } from "@/lib/frames/schema";
import { projectIdSchema, type ProjectId } from "@/lib/ids";
import { listDemoAccounts } from "@/lib/people/reads";
import { createAccount } from "@/lib/people/writes";
import { writeDemoState } from "@/lib/storage/demo-state";

/** The invented scene: a harbour town on a slope. */
export const DEMO_PROJECT_NAME = "Harbour front at low tide";
/** As in the browser: more would only queue. */
const UPLOADS_AT_ONCE = 3;
const POLL_MS = 500;

interface WrittenFrame {
  readonly file: string;
  readonly total: number;
}

export interface DemoMaking {
  /** Where the product answers on this machine. */
  readonly address: string;
  /** Writes the demo's frames into a folder and tells of each one that is there ("/" between names). */
  readonly makeShoot: (folder: string, onWritten: (frame: WrittenFrame) => void) => Promise<unknown>;
  readonly say: (sentence: string) => void;
  /** Called once people can sign in with them. */
  readonly onAccounts: () => void;
}

/**
 * Makes the demo: accounts, a project, and its frames, brought in over HTTP like anyone's. A making that was cut short
 * is completed by the next one.
 */
export async function makeDemo({ address, makeShoot, say, onAccounts }: DemoMaking): Promise<void> {
  await makeAccounts();
  onAccounts();
  const session = await signIn(address, { email: leadEmail(), password: DEMO_PASSWORD });
  const projectId = await findOrMakeProject(session);
  const folder = await mkdtemp(path.join(tmpdir(), "stackyard-demo-"));
  try {
    say("drawing its frames, and bringing them in as they come");
    await bringIn({ session, projectId, folder, makeShoot, say });
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
  await writeDemoState("made");
  await waitUntilSorted({ session, projectId, say });
}

function leadEmail(): string {
  const lead = DEMO_ACCOUNTS.find(({ role }) => role === "lead");
  if (!lead) throw new Error("the demo has no lead");
  return lead.email;
}

async function makeAccounts(): Promise<void> {
  const present = new Set((await listDemoAccounts()).map(({ email }) => email));
  for (const { email, name } of DEMO_ACCOUNTS) {
    if (!present.has(email)) await createAccount({ email, name, password: DEMO_PASSWORD }, { isDemo: true });
  }
}

async function findOrMakeProject(session: HttpSession): Promise<ProjectId> {
  const [present] = await listDemoProjects();
  const id = present?.id ?? (await findUnmarked(session)) ?? (await makeProject(session));
  await markDemoProject(id);
  return id;
}

/** Made over HTTP by an earlier making that ended before it could be marked. */
async function findUnmarked(session: HttpSession): Promise<ProjectId | undefined> {
  const schema = z.object({ projects: z.array(z.object({ id: projectIdSchema, name: z.string() })) });
  const { projects } = await callJson(session, "/api/projects", { schema });
  return projects.find(({ name }) => name === DEMO_PROJECT_NAME)?.id;
}

async function makeProject(session: HttpSession): Promise<ProjectId> {
  const body = { name: DEMO_PROJECT_NAME };
  return (await callJson(session, "/api/projects", { schema: z.object({ id: projectIdSchema }), body })).id;
}

interface BringIn extends Pick<DemoMaking, "makeShoot" | "say"> {
  readonly session: HttpSession;
  readonly projectId: ProjectId;
  readonly folder: string;
}

async function bringIn({ session, projectId, folder, makeShoot, say }: BringIn): Promise<void> {
  const earlier = await listDemoUploads(projectId);
  for (const upload of earlier) if (!upload.isFinished) await terminateUpload(session, upload.id);
  const isIn = new Set(earlier.filter((upload) => upload.isFinished).map(relativeName));
  let done = 0;
  async function send({ file, total }: WrittenFrame): Promise<void> {
    if (!isIn.has(file)) await uploadFile(session, { projectId, root: folder, name: file });
    done++;
    if (done % Math.ceil(total / 4) === 0 || done === total) say(`${done} of ${total} frames brought in`);
  }
  const lanes = makeLanes(UPLOADS_AT_ONCE);
  await makeShoot(folder, (frame) => lanes.add(() => send(frame)));
  await lanes.finish();
}

/** Runs what is added, so many at once, in turn. */
function makeLanes(count: number): { add(work: () => Promise<void>): void; finish(): Promise<unknown> } {
  const lanes = Array.from({ length: count }, () => Promise.resolve());
  let next = 0;
  return {
    add(work) {
      const lane = (lanes[next % count] ?? Promise.resolve()).then(work);
      // Told of in `finish`; until then a failed lane only stands still.
      lane.catch(() => undefined);
      lanes[next % count] = lane;
      next++;
    },
    finish: () => Promise.all(lanes),
  };
}

function relativeName({ folder, name }: { readonly folder: string | null; readonly name: string }): string {
  return folder ? `${folder}/${name}` : name;
}

async function waitUntilSorted({
  session,
  projectId,
  say,
}: Pick<BringIn, "session" | "projectId" | "say">): Promise<void> {
  let said = -1;
  for (;;) {
    const progress = await callJson(session, `/api/projects/${projectId}/progress`, { schema: progressSchema });
    if (progress.sorted) break;
    const quarter = Math.floor((progress.analysed * 4) / progress.total);
    if (quarter > Math.max(said, 0)) say(`${progress.analysed} of ${progress.total} frames measured`);
    said = quarter;
    await new Promise((resolve) => setTimeout(resolve, POLL_MS));
  }
  say(`sorted. Its board: ${session.address}/projects/${projectId}/board`);
}
