import type { GivenCommand, KeptCommand, KeptCommands } from "@/components/together/kept-commands";
import { conflictSchema, type CommandAnswer, type Conflict } from "@/lib/board/command-answers";
import type { BoardCommand } from "@/lib/board/command-schema";
import type { WaitingCommand } from "@/lib/board/show-waiting";
import { subjectsOf } from "@/lib/board/subject-words";
import { FetchProblem } from "@/lib/http/fetch-json";

/** Given, and perhaps answered. */
export type QueuedCommand = GivenCommand & Pick<WaitingCommand, "revision" | "changes">;

/** A command that the server did not do, until its person has read so. */
export interface Refusal {
  readonly given: GivenCommand;
  /** The server's words. */
  readonly detail: string;
  /** Where something else is there now than the person saw. */
  readonly conflict: Conflict | null;
  /** What they asked for rested on a command that was refused before it. */
  readonly follows: GivenCommand | null;
  /** The server failed or did not take it in: the same may be tried again. */
  readonly isRepeatable: boolean;
}

export interface QueueState {
  /** In the order given; the newest answered ones stay, so that an undo of them is shown at once. */
  readonly commands: readonly QueuedCommand[];
  readonly connection: "fine" | "none" | "signed out";
  readonly refusals: readonly Refusal[];
  /** When the last command was recorded; null: none since the page was opened. */
  readonly savedAtMs: number | null;
  /** The browser keeps the commands over a reload. */
  readonly isKept: boolean;
}

export interface QueueParts {
  readonly send: (command: BoardCommand) => Promise<CommandAnswer>;
  readonly kept: KeptCommands;
  readonly now: () => number;
  /** Told of every recorded command, once it counts as answered. */
  readonly onAnswer: (answer: CommandAnswer) => void;
  readonly onRefused: (refusal: Refusal) => void;
}

/** Between attempts to reach the server, ms: doubled from the first to the last. */
const WAIT_FIRST_MS = 500;
const WAIT_MOST_MS = 10_000;
/** Answered commands whose changes stay known. */
const ANSWERED_MOST = 50;
/** Answers of proxies and of a server that is starting or stopping: as good as none. 401 waits for a sign-in. */
const NO_ANSWER = new Set([0, 408, 429, 502, 503, 504]);

/**
 * Sends commands one after another in the order given, each until it is answered: without a connection they wait,
 * kept in the browser, and are sent with the same ids when it is back. A refused one stays until its person has read
 * why. TanStack Query's mutations would stand still while the tab is hidden, so this does not use them.
 */
export class CommandQueue {
  private state: QueueState = { commands: [], connection: "fine", refusals: [], savedAtMs: null, isKept: true };
  private readonly listeners = new Set<() => void>();
  private isSending = false;
  private wake: (() => void) | null = null;

  constructor(private readonly parts: QueueParts) {}

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  readonly getState = (): QueueState => this.state;

  /** Commands that an earlier page left behind. What was refused there is told here, not sent again. */
  resume(): void {
    const known = new Set(this.state.commands.map(({ command }) => command.id));
    for (const { given } of this.state.refusals) known.add(given.command.id);
    const left = this.parts.kept.list().filter(({ command }) => !known.has(command.id));
    if (left.length === 0) return;
    const waiting = left.filter(({ refused }) => refused === undefined);
    this.change({
      commands: [...waiting.map(unanswered), ...this.state.commands],
      refusals: [...left.flatMap(refusalOf), ...this.state.refusals],
    });
    void this.sendAll();
  }

  add(given: GivenCommand): void {
    const isKept = this.parts.kept.keep(given);
    this.change({ commands: [...this.state.commands, unanswered(given)], isKept: this.state.isKept && isKept });
    void this.sendAll();
  }

  /** Resolves once every command given so far, and meanwhile, has been answered. */
  async whenIdle(): Promise<void> {
    while (this.next()) {
      await new Promise<void>((resolve) => {
        const stop = this.subscribe(() => {
          stop();
          resolve();
        });
      });
    }
  }

  /** The connection may be back: no need to wait any longer. */
  readonly tryNow = (): void => {
    this.wake?.();
  };

  /** Its person has read why it was refused. */
  dismiss(refusal: Refusal): void {
    this.parts.kept.forget(refusal.given.command.id);
    this.change({ refusals: this.state.refusals.filter((each) => each !== refusal) });
  }

  /** Once more with the same id, where the server failed. */
  repeat(refusal: Refusal): void {
    this.change({ refusals: this.state.refusals.filter((each) => each !== refusal) });
    this.add(refusal.given);
  }

  private change(part: Partial<QueueState>): void {
    this.state = { ...this.state, ...part };
    for (const listener of [...this.listeners]) listener();
  }

  private async sendAll(): Promise<void> {
    if (this.isSending) return;
    this.isSending = true;
    let failures = 0;
    for (let next = this.next(); next; next = this.next()) {
      if (await this.send(next)) {
        failures = 0;
        continue;
      }
      await this.pause(Math.min(WAIT_FIRST_MS * 2 ** failures, WAIT_MOST_MS));
      failures += 1;
    }
    this.isSending = false;
  }

  private next(): QueuedCommand | undefined {
    return this.state.commands.find(({ revision }) => revision === null);
  }

  /** @returns whether the server has spoken on it */
  private async send(queued: QueuedCommand): Promise<boolean> {
    let answer: CommandAnswer;
    try {
      answer = await this.parts.send(queued.command);
    } catch (error) {
      const status = error instanceof FetchProblem ? error.status : null;
      if (status === 401 || (status !== null && NO_ANSWER.has(status))) {
        this.change({ connection: status === 401 ? "signed out" : "none" });
        return false;
      }
      this.refuse(queued, error);
      return true;
    }
    this.take(queued, answer);
    return true;
  }

  private take(queued: QueuedCommand, answer: CommandAnswer): void {
    const { id } = queued.command;
    const commands = this.state.commands.map((each) =>
      each.command.id === id ? { ...each, revision: answer.revision, changes: answer.changes } : each,
    );
    this.parts.kept.forget(id);
    this.change({ commands: forgetOld(commands), connection: "fine", savedAtMs: this.parts.now() });
    this.parts.onAnswer(answer);
  }

  private refuse(queued: QueuedCommand, error: unknown): void {
    const { revision: _revision, changes: _changes, ...given } = queued;
    const refused = explain(error);
    this.parts.kept.keep({ ...given, refused });
    const refusal: Refusal = {
      given,
      ...refused,
      follows: this.state.refusals.find((earlier) => restsOn(given, earlier.given))?.given ?? null,
    };
    this.change({
      commands: this.state.commands.filter(({ command }) => command.id !== given.command.id),
      connection: "fine",
      refusals: [...this.state.refusals, refusal],
    });
    this.parts.onRefused(refusal);
  }

  private async pause(ms: number): Promise<void> {
    await new Promise<void>((resolve) => {
      const timer = setTimeout(resolve, ms);
      this.wake = () => {
        clearTimeout(timer);
        resolve();
      };
    });
    this.wake = null;
  }
}

function refusalOf({ refused, ...given }: KeptCommand): Refusal[] {
  return refused ? [{ given, ...refused, follows: null }] : [];
}

function unanswered(given: GivenCommand): QueuedCommand {
  return { ...given, revision: null, changes: null };
}

function forgetOld(commands: readonly QueuedCommand[]): QueuedCommand[] {
  const answered = commands.filter(({ revision }) => revision !== null);
  const old = new Set(answered.slice(0, Math.max(0, answered.length - ANSWERED_MOST)));
  return commands.filter((each) => !old.has(each));
}

function explain(error: unknown): Pick<Refusal, "detail" | "conflict" | "isRepeatable"> {
  if (!(error instanceof FetchProblem)) {
    return {
      detail: "The server's answer was not understood. Load the page again.",
      conflict: null,
      isRepeatable: true,
    };
  }
  const conflict = error.status === 409 ? conflictSchema.safeParse(error.body) : null;
  return { detail: error.detail, conflict: conflict?.data ?? null, isRepeatable: error.status >= 500 };
}

/** It names what the earlier one named or made, or takes it back. What merely lies in the same stack rests on nothing. */
function restsOn(later: GivenCommand, earlier: GivenCommand): boolean {
  const named = new Set([earlier.command.id, ...subjectsOf(earlier.command)]);
  return subjectsOf(later.command).some((id) => named.has(id));
}
