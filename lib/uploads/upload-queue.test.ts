import { beforeEach, expect, test, vi } from "vitest";
import { UploadQueue, type MakeTransfer, type OutgoingFile, type TransferEvents } from "@/lib/uploads/upload-queue";

interface Line {
  readonly name: string;
  readonly events: TransferEvents;
  starts: number;
  pauses: number;
  cancels: number;
}

function makeLines(): { lines: Line[]; makeTransfer: MakeTransfer; line: (name: string) => Line } {
  const lines: Line[] = [];
  const makeTransfer: MakeTransfer = (file, events) => {
    const line: Line = { name: file.name, events, starts: 0, pauses: 0, cancels: 0 };
    lines.push(line);
    return {
      start: () => void (line.starts += 1),
      pause: () => void (line.pauses += 1),
      cancel: () => void (line.cancels += 1),
    };
  };
  const line = (name: string) => {
    const found = lines.findLast((candidate) => candidate.name === name);
    if (!found) throw new Error(`${name} was never started`);
    return found;
  };
  return { lines, makeTransfer, line };
}

function makeFiles(count: number): OutgoingFile[] {
  return Array.from({ length: count }, (_, at) => ({
    name: `f${at}`,
    folder: "shoot",
    lastModifiedMs: 0,
    bytes: 1000,
    content: new Blob(),
    uploadUrl: null,
  }));
}

beforeEach(() => {
  vi.useFakeTimers();
  return () => vi.useRealTimers();
});

const settle = (queue: UploadQueue) => {
  vi.advanceTimersByTime(250);
  return queue.getSnapshot();
};

test("three files are sent at a time, the others wait their turn", () => {
  const { lines, makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  queue.add(makeFiles(5));
  expect(settle(queue).counts).toMatchObject({ sending: 3, waiting: 2 });
  line("f1").events.onDone();
  expect(settle(queue).counts).toMatchObject({ sending: 3, waiting: 1, done: 1 });
  expect(lines.map(({ name }) => name)).toEqual(["f0", "f1", "f2", "f3"]);
});

test("a refused file stops nothing else, and can be tried again", () => {
  const { makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  queue.add(makeFiles(4));
  line("f0").events.onFailure({ kind: "refused", message: "This is empty." });
  expect(settle(queue).items[0]).toMatchObject({ state: "failed", message: "This is empty." });
  expect(queue.getSnapshot().counts.sending).toBe(3);
  for (const name of ["f1", "f2", "f3"]) line(name).events.onDone();
  queue.retryAll();
  expect(settle(queue).counts).toMatchObject({ sending: 1, failed: 0, done: 3 });
});

test("a session that ends pauses everything, and signing in again goes on with the same uploads", () => {
  const { lines, makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  queue.add(makeFiles(4));
  line("f2").events.onProgress(600);
  line("f0").events.onFailure({ kind: "signed-out" });
  const held = settle(queue);
  expect(held.hold?.kind).toBe("signed-out");
  expect(held.counts).toMatchObject({ sending: 0, waiting: 4, failed: 0 });
  expect(line("f1").pauses).toBe(1);
  vi.advanceTimersByTime(60_000);
  expect(lines).toHaveLength(3);
  queue.goOn();
  expect(settle(queue).counts.sending).toBe(3);
  expect(line("f2").starts).toBe(2);
  expect(lines).toHaveLength(3);
});

test("a server that does not answer is tried again by itself", () => {
  const { makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  queue.add(makeFiles(1));
  line("f0").events.onFailure({ kind: "no-answer" });
  expect(settle(queue).hold?.kind).toBe("offline");
  vi.advanceTimersByTime(6_000);
  expect(settle(queue).hold).toBeNull();
  expect(line("f0").starts).toBe(2);
});

test("going offline pauses, and what pausing itself reports is no failure", () => {
  const { makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  queue.add(makeFiles(2));
  queue.goOffline();
  line("f0").events.onFailure({ kind: "refused", message: "aborted" });
  expect(settle(queue).counts).toMatchObject({ waiting: 2, failed: 0 });
});

test("cancelling one or all tells the server and leaves what is in", () => {
  const { makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  queue.add(makeFiles(5));
  line("f0").events.onDone();
  const second = settle(queue).items[1];
  if (second) queue.cancel(second.id);
  expect(line("f1").cancels).toBe(1);
  queue.cancelAll();
  expect(settle(queue).counts).toMatchObject({ done: 1, cancelled: 4, sending: 0, waiting: 0 });
  expect(queue.isUnfinished()).toBe(false);
});

test("rate and time left follow from what was sent in the last seconds", () => {
  const { makeTransfer, line } = makeLines();
  let nowMs = 0;
  const queue = new UploadQueue(makeTransfer, () => nowMs);
  queue.add(makeFiles(4));
  settle(queue);
  expect(queue.getSnapshot().bytesPerSecond).toBeNull();
  nowMs = 2000;
  line("f0").events.onProgress(500);
  line("f1").events.onProgress(500);
  // By hand: 1 000 bytes in 2 s are 500 a second; 3 000 of 4 000 bytes are left, 6 s.
  expect(settle(queue)).toMatchObject({ sentBytes: 1000, totalBytes: 4000, bytesPerSecond: 500, secondsLeft: 6 });
});

test("listeners hear of changes a few times a second, however many there are", () => {
  const { makeTransfer, line } = makeLines();
  const queue = new UploadQueue(makeTransfer);
  const listener = vi.fn();
  queue.subscribe(listener);
  queue.add(makeFiles(1));
  for (let sent = 0; sent < 1000; sent += 1) line("f0").events.onProgress(sent);
  settle(queue);
  expect(listener).toHaveBeenCalledTimes(1);
});
