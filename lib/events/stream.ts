import "server-only";
import { and, asc, eq, gt, sql } from "drizzle-orm";
import { database } from "@/db/client";
import { events } from "@/db/schema/board";
import type { ProjectAccess } from "@/lib/auth/gate";
import { type ProjectEvent, projectEventSchema, STREAM_EVENT_NAME } from "@/lib/events/schema";
import type { ProjectId } from "@/lib/ids";

/** How often the process looks for new events, ms: one query however many pages are open. */
const POLL_MS = 250;
const POLL_ROWS = 1000;
/** A comment this often keeps proxies from closing a quiet stream, ms; the right to listen is checked with it. */
const KEEP_ALIVE_MS = 15_000;
/** A page that was away for more than this fetches everything anew instead. */
const BACKLOG_MOST = 500;

interface EventRow {
  readonly id: number;
  readonly projectId: ProjectId;
  readonly event: ProjectEvent;
}

type Listener = (row: EventRow) => void;

interface Poller {
  readonly listeners: Set<Listener>;
  /** The newest event that listeners have been told of. */
  lastId: number;
  timer: NodeJS.Timeout | null;
}

// Next loads server modules more than once: one poller a process all the same.
const holder: { stackyardPoller?: Poller } = globalThis as object;

function poller(): Poller {
  holder.stackyardPoller ??= { listeners: new Set(), lastId: 0, timer: null };
  return holder.stackyardPoller;
}

export interface StreamOptions {
  /** `Last-Event-ID`: the last event that the page has seen; null: it begins now. */
  readonly afterId: number | null;
  readonly signal: AbortSignal;
  /** Asked with every keep-alive; false ends the stream. */
  readonly mayListen: () => Promise<boolean>;
}

/** A project's events as a server-sent event stream (HTML Standard, 9.2), until the page goes or may listen no longer. */
export function streamEvents(access: ProjectAccess, options: StreamOptions): ReadableStream<Uint8Array> {
  const encoder = new TextEncoder();
  let isOver = false;
  const releases: (() => void)[] = [];
  const end = () => {
    isOver = true;
    for (const release of releases.splice(0)) release();
  };
  return new ReadableStream({
    async start(controller) {
      const send = (text: string) => {
        if (!isOver) controller.enqueue(encoder.encode(text));
      };
      const close = () => {
        if (isOver) return;
        end();
        controller.close();
      };
      options.signal.addEventListener("abort", close, { once: true });
      const afterId = options.afterId ?? (await findNewestId());
      const seen = { id: afterId };
      const tell: Listener = ({ id, projectId, event }) => {
        if (projectId !== access.projectId || id <= seen.id) return;
        seen.id = id;
        send(format(id, event));
      };
      // What happens while the backlog is read waits: told first, it would make the older events count as seen.
      let held: EventRow[] | null = [];
      const hear: Listener = (row) => (held ? void held.push(row) : tell(row));
      releases.push(await subscribe(hear));
      const keepAlive = setInterval(() => {
        send(": still here\n\n");
        void options.mayListen().then((may) => may || close(), close);
      }, KEEP_ALIVE_MS);
      releases.push(() => clearInterval(keepAlive));
      if (options.signal.aborted) close();
      // The page may have gone while this waited for the database: `cancel` found nothing to release yet.
      if (isOver) return end();
      // The id goes out at once: a page whose connection breaks before the first event resumes from here.
      send(`id: ${seen.id}\n: open\n\n`);
      await sendBacklog(access.projectId, afterId, tell);
      const waiting = held;
      held = null;
      waiting.forEach(tell);
    },
    cancel: end,
  });
}

async function sendBacklog(projectId: ProjectId, afterId: number, tell: Listener): Promise<void> {
  const rows = await listEvents(and(gt(events.id, afterId), eq(events.projectId, projectId)), BACKLOG_MOST + 1);
  const isUnknown = afterId > (await findNewestId()) || afterId + 1 < (await findOldestId());
  if (rows.length <= BACKLOG_MOST && !isUnknown) return rows.forEach(tell);
  const newest = await findNewestId();
  tell({ id: Math.max(newest, afterId + 1), projectId, event: { type: "missed" } });
}

/** Tells `listener` of every event from now on. */
async function subscribe(listener: Listener): Promise<() => void> {
  const shared = poller();
  if (shared.listeners.size === 0) shared.lastId = await findNewestId();
  shared.listeners.add(listener);
  shared.timer ??= setTimeout(() => void poll(), POLL_MS);
  return () => {
    shared.listeners.delete(listener);
  };
}

async function poll(): Promise<void> {
  const shared = poller();
  try {
    const rows = await listEvents(gt(events.id, shared.lastId), POLL_ROWS);
    for (const row of rows) {
      shared.lastId = row.id;
      for (const listener of [...shared.listeners]) listener(row);
    }
  } catch (error) {
    console.error("looking for events failed; it is tried again", error);
  }
  shared.timer = shared.listeners.size > 0 ? setTimeout(() => void poll(), POLL_MS) : null;
}

async function listEvents(condition: ReturnType<typeof and>, most: number): Promise<EventRow[]> {
  const rows = await database()
    .select({ id: events.id, projectId: events.projectId, type: events.type, payload: events.payload })
    .from(events)
    .where(condition)
    .orderBy(asc(events.id))
    .limit(most);
  return rows.map(({ id, projectId, type, payload }) => ({
    id,
    projectId,
    event: projectEventSchema.parse({ type, ...payload }),
  }));
}

async function findNewestId(): Promise<number> {
  const [row] = await database()
    .select({ id: sql<number | null>`max(${events.id})` })
    .from(events);
  return row?.id ?? 0;
}

async function findOldestId(): Promise<number> {
  const [row] = await database()
    .select({ id: sql<number | null>`min(${events.id})` })
    .from(events);
  return row?.id ?? 0;
}

function format(id: number, event: ProjectEvent): string {
  return `id: ${id}\nevent: ${STREAM_EVENT_NAME}\ndata: ${JSON.stringify(event)}\n\n`;
}
