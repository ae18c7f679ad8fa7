import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { CommandQueue, type Refusal } from "@/components/together/command-queue";
import { type GivenCommand, KeptCommands } from "@/components/together/kept-commands";
import type { CommandAnswer } from "@/lib/board/command-answers";
import type { BoardCommand } from "@/lib/board/command-schema";
import { FetchProblem } from "@/lib/http/fetch-json";

/** What a browser keeps: as `localStorage`, in memory (Web Storage, HTML Standard 12.2). */
class MemoryStorage {
  readonly items = new Map<string, string>();
  get length() {
    return this.items.size;
  }
  key(at: number) {
    return [...this.items.keys()][at] ?? null;
  }
  getItem(key: string) {
    return this.items.get(key) ?? null;
  }
  setItem(key: string, value: string) {
    this.items.set(key, value);
  }
  removeItem(key: string) {
    this.items.delete(key);
  }
}

type Reply = "done" | "lost" | "offline" | "signed out" | "conflict" | "forbidden" | "failed";
const PROBLEMS: Record<Exclude<Reply, "done" | "lost">, FetchProblem> = {
  offline: new FetchProblem(0, "offline", "No answer from the server."),
  "signed out": new FetchProblem(401, "unauthenticated", "Sign in first."),
  conflict: new FetchProblem(409, "conflict", "HARB0019: It has been moved since.", {
    subjectId: "frame-17",
    revision: 7,
    present: null,
    lastChange: { id: "change-7", person: "Jonas", sentence: "moved HARB0019 from A3 to B2", atMs: 5 },
  }),
  forbidden: new FetchProblem(403, "forbidden", "As a viewer you may look."),
  failed: new FetchProblem(500, "unexpected", "The server answered 500."),
};

/** A server that records each id once, answers as it is told, and then says "done". */
class PretendServer {
  readonly recorded: string[] = [];
  readonly heard: string[] = [];
  replies: Reply[] = [];

  readonly send = async (command: BoardCommand): Promise<CommandAnswer> => {
    this.heard.push(command.id);
    const reply = this.replies.shift() ?? "done";
    await Promise.resolve();
    if (reply !== "done" && reply !== "lost") throw PROBLEMS[reply];
    if (!this.recorded.includes(command.id)) this.recorded.push(command.id);
    if (reply === "lost") throw PROBLEMS.offline;
    return { id: command.id, revision: this.recorded.indexOf(command.id) + 1, changes: [] };
  };
}

const ids = ["1", "2", "3"].map((digit) => `${digit.repeat(8)}-1111-4111-8111-111111111111`);

function given(at: number, frameId = "frame-17"): GivenCommand {
  return {
    command: { id: ids[at] ?? "", revision: 1, type: "move-frames", frameIds: [frameId], to: { kind: "loose" } },
    sentence: `step ${at}`,
    // As `describeSubjects` fills it: the stack that it lay in and the grid as well.
    seen: { [frameId]: `${frameId} is in A3`, "stack-3": "A3: 6 frames", grid: "The grid has 3 rows and 6 columns" },
    givenAtMs: at,
  };
}

let storage: MemoryStorage;
let server: PretendServer;
let refused: Refusal[];

function open(user = "user-1"): CommandQueue {
  return new CommandQueue({
    send: server.send,
    kept: new KeptCommands(storage, user, "project-1"),
    now: () => 1_000,
    onAnswer: () => undefined,
    onRefused: (refusal) => refused.push(refusal),
  });
}

beforeEach(() => {
  vi.useFakeTimers();
  storage = new MemoryStorage();
  server = new PretendServer();
  refused = [];
});
afterEach(() => vi.useRealTimers());

const waiting = (queue: CommandQueue) =>
  queue.getState().commands.flatMap(({ command, revision }) => (revision === null ? [command.id] : []));

test("commands are sent one after another, in the order given", async () => {
  const queue = open();
  for (const at of [0, 1, 2]) queue.add(given(at));
  expect(server.heard).toEqual([ids[0]]);
  await queue.whenIdle();
  expect(server.recorded).toEqual(ids);
  expect(queue.getState()).toMatchObject({ savedAtMs: 1_000, connection: "fine", refusals: [] });
  expect(storage.items.size).toBe(0);
});

test("without a connection they wait, and go in order with the same ids when it is back", async () => {
  server.replies = ["offline", "offline"];
  const queue = open();
  for (const at of [0, 1, 2]) queue.add(given(at));
  await vi.advanceTimersByTimeAsync(100);
  expect(queue.getState().connection).toBe("none");
  expect(waiting(queue)).toEqual(ids);
  await vi.advanceTimersByTimeAsync(500);
  expect(server.heard).toEqual([ids[0], ids[0]]);
  // The browser says that it is back: nobody waits for the timer.
  queue.tryNow();
  await vi.advanceTimersByTimeAsync(0);
  expect(server.recorded).toEqual(ids);
  expect(queue.getState().connection).toBe("fine");
});

test("an answer that got lost is asked for again: the command is recorded once", async () => {
  server.replies = ["lost"];
  const queue = open();
  queue.add(given(0));
  await vi.advanceTimersByTimeAsync(1_000);
  expect(server.heard).toEqual([ids[0], ids[0]]);
  expect(server.recorded).toEqual([ids[0]]);
  expect(waiting(queue)).toEqual([]);
});

test("what waits outlives the page, and only its own person's page sends it", async () => {
  server.replies = Array.from({ length: 9 }, () => "offline");
  const before = open();
  for (const at of [1, 0]) before.add(given(at));
  await vi.advanceTimersByTimeAsync(10);
  const other = new PretendServer();
  const stranger = new CommandQueue({
    send: other.send,
    kept: new KeptCommands(storage, "user-2", "project-1"),
    now: () => 0,
    onAnswer: () => undefined,
    onRefused: () => undefined,
  });
  stranger.resume();
  expect(other.heard).toEqual([]);
  server = new PretendServer();
  const after = open();
  after.resume();
  await after.whenIdle();
  expect(server.recorded).toEqual([ids[0], ids[1]]);
  expect(storage.items.size).toBe(0);
});

test("a session that ended keeps the commands until somebody has signed in", async () => {
  server.replies = ["signed out"];
  const queue = open();
  queue.add(given(0));
  await vi.advanceTimersByTimeAsync(10);
  expect(queue.getState().connection).toBe("signed out");
  expect(storage.items.size).toBe(1);
  await vi.advanceTimersByTimeAsync(1_000);
  expect(server.recorded).toEqual([ids[0]]);
});

test("a refused command is taken off the board, shown, and kept until it was read", async () => {
  server.replies = ["conflict"];
  const queue = open();
  queue.add(given(0));
  await queue.whenIdle();
  const [refusal] = queue.getState().refusals;
  expect(refusal).toMatchObject({
    detail: "HARB0019: It has been moved since.",
    conflict: { subjectId: "frame-17", lastChange: { person: "Jonas" } },
    isRepeatable: false,
    follows: null,
  });
  expect(refused).toHaveLength(1);
  expect(queue.getState().commands).toEqual([]);
  // A page that is opened before it was read shows it again, and sends nothing: the board may fit it by now.
  const later = open();
  later.resume();
  await later.whenIdle();
  expect(server.heard).toHaveLength(1);
  expect(later.getState().refusals).toMatchObject([{ detail: refusal?.detail, conflict: refusal?.conflict }]);
  if (refusal) queue.dismiss(refusal);
  expect(queue.getState().refusals).toEqual([]);
  expect(storage.items.size).toBe(0);
});

test("a later command about the same says on which refused one it rested; the others are done", async () => {
  server.replies = ["conflict", "conflict", "done"];
  const queue = open();
  queue.add(given(0));
  queue.add(given(1));
  queue.add(given(2, "frame-3"));
  await queue.whenIdle();
  expect(queue.getState().refusals.map(({ follows }) => follows?.sentence ?? null)).toEqual([null, "step 0"]);
  expect(server.recorded).toEqual([ids[2]]);
});

test("a refused command about other frames of the same stack rested on nothing; taking back a refused one did", async () => {
  server.replies = ["conflict", "conflict", "conflict"];
  const queue = open();
  queue.add(given(0));
  queue.add(given(1, "frame-18"));
  const command = { id: ids[2] ?? "", revision: 1, type: "undo", commandId: ids[0] ?? "" } as const;
  queue.add({ ...given(2), command, sentence: "undid: step 0" });
  await queue.whenIdle();
  expect(queue.getState().refusals.map(({ follows }) => follows?.sentence ?? null)).toEqual([null, null, "step 0"]);
});

test("a missing right cannot be repeated; where the server failed the same id is sent again", async () => {
  server.replies = ["forbidden", "failed"];
  const queue = open();
  queue.add(given(0));
  queue.add(given(1));
  await queue.whenIdle();
  const [forbidden, failed] = queue.getState().refusals;
  expect(forbidden).toMatchObject({ isRepeatable: false, conflict: null, detail: "As a viewer you may look." });
  expect(failed?.isRepeatable).toBe(true);
  if (failed) queue.repeat(failed);
  await queue.whenIdle();
  expect(server.recorded).toEqual([ids[1]]);
});

test("where the browser keeps nothing, the page knows that it must stay open", async () => {
  server.replies = ["offline"];
  storage.setItem = () => {
    throw new DOMException("full", "QuotaExceededError");
  };
  const queue = open();
  queue.add(given(0));
  expect(queue.getState().isKept).toBe(false);
  await vi.advanceTimersByTimeAsync(1_000);
  expect(server.recorded).toEqual([ids[0]]);
});
