import { beforeEach, expect, test, vi } from "vitest";
import { eq } from "drizzle-orm";
import { useDatabase } from "../support/database";
import { makePerson, makeProject, type Person, signInAs } from "../support/people";
import { GET as getEvents } from "@/app/api/projects/[projectId]/events/route";
import { writeTransaction } from "@/db/client";
import { sessions } from "@/db/schema/accounts";
import { publish } from "@/lib/events/publish";
import { type ProjectEvent, projectEventSchema } from "@/lib/events/schema";
import type { ProjectId } from "@/lib/ids";

useDatabase();
/** Events come within a second; a busy machine is given its time, ms. */
const SOON = 20_000;

let lead: Person;
let projectId: ProjectId;

beforeEach(async () => {
  lead = await makePerson("Lena Lead");
  projectId = await makeProject(lead);
  await signInAs(lead);
});

const say = (project: ProjectId, revision: number) =>
  writeTransaction((tx) => publish(tx, project, { type: "board.changed", revision }, Date.now()));

/** A page that listens, read as the HTML Standard's event stream (9.2.6). */
class Page {
  readonly leaving = new AbortController();
  private reader: ReadableStreamDefaultReader<Uint8Array> | undefined;
  private text = "";
  hasEnded = false;
  status = 0;
  headers = new Headers();

  async open(lastEventId?: string): Promise<this> {
    const headers: Record<string, string> = lastEventId === undefined ? {} : { "last-event-id": lastEventId };
    const request = new Request("http://localhost/", { headers, signal: this.leaving.signal });
    const answer = await getEvents(request, { params: Promise.resolve({ projectId }) });
    this.status = answer.status;
    this.headers = answer.headers;
    this.reader = answer.body?.getReader();
    void this.read();
    await vi.waitFor(() => expect(this.text).toContain(": open"), SOON);
    return this;
  }

  private async read(): Promise<void> {
    const decoder = new TextDecoder();
    for (;;) {
      const { done, value } = (await this.reader?.read()) ?? { done: true, value: undefined };
      if (done) break;
      this.text += decoder.decode(value, { stream: true });
    }
    this.hasEnded = true;
  }

  get events(): ProjectEvent[] {
    return [...this.text.matchAll(/^data: (.*)$/gm)].map(([, data]) =>
      projectEventSchema.parse(JSON.parse(data ?? "")),
    );
  }

  get lastId(): string {
    return [...this.text.matchAll(/^id: (.*)$/gm)].at(-1)?.[1] ?? "";
  }
}

test("a page hears its project's events and no other's, uncompressed", async () => {
  const page = await new Page().open();
  expect(page.headers.get("content-type")).toBe("text/event-stream");
  expect(page.headers.get("cache-control")).toBe("no-cache, no-transform");
  await say(await makeProject(lead, "Other"), 7);
  await say(projectId, 1);
  await vi.waitFor(() => expect(page.events).toEqual([{ type: "board.changed", revision: 1 }]), SOON);
  page.leaving.abort();
  await vi.waitFor(() => expect(page.hasEnded).toBe(true), SOON);
});

test("a page that comes back hears what it missed, once and in order", async () => {
  const before = await new Page().open();
  await say(projectId, 1);
  await vi.waitFor(() => expect(before.events).toHaveLength(1), SOON);
  before.leaving.abort();
  await say(projectId, 2);
  await say(projectId, 3);
  const after = await new Page().open(before.lastId);
  await say(projectId, 4);
  await vi.waitFor(() => expect(after.events).toHaveLength(3), SOON);
  expect(after.events.map((event) => event.type === "board.changed" && event.revision)).toEqual([2, 3, 4]);
  after.leaving.abort();
});

test("a page that was away too long, or knows of events that never were, is told to fetch everything anew", async () => {
  for (let revision = 1; revision <= 501; revision += 1) await say(projectId, revision);
  for (const id of ["0", "999999"]) {
    const page = await new Page().open(id);
    await vi.waitFor(() => expect(page.events).toEqual([{ type: "missed" }]), SOON);
    await say(projectId, 502);
    page.leaving.abort();
  }
});

test("a stream ends when its session ends", async () => {
  vi.useFakeTimers({ toFake: ["setInterval", "clearInterval"] });
  try {
    const page = await new Page().open();
    await vi.advanceTimersByTimeAsync(15_000);
    expect(page.hasEnded).toBe(false);
    await writeTransaction((tx) => tx.delete(sessions).where(eq(sessions.userId, lead.id)));
    await vi.advanceTimersByTimeAsync(15_000);
    await vi.waitFor(() => expect(page.hasEnded).toBe(true), SOON);
  } finally {
    vi.useRealTimers();
  }
});
