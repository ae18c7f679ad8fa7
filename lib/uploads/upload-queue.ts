/** A file to be sent, as the browser gave it. */
export interface OutgoingFile {
  readonly name: string;
  /** "/"-separated, relative to what was dropped; "" at the root. */
  readonly folder: string;
  readonly lastModifiedMs: number;
  readonly bytes: number;
  readonly content: Blob;
  /** Where an earlier upload of the same file goes on; null: from the start. */
  readonly uploadUrl: string | null;
}

export type UploadState = "waiting" | "sending" | "done" | "failed" | "cancelled";

export interface UploadItem {
  readonly id: number;
  readonly file: OutgoingFile;
  readonly state: UploadState;
  readonly sentBytes: number;
  /** Why it failed and what to do; null: it did not. */
  readonly message: string | null;
}

/** Why nothing is being sent at the moment. */
export interface Hold {
  /** offline: goes on by itself. signed-out, full: goes on when a person says so. */
  readonly kind: "offline" | "signed-out" | "full";
  readonly message: string;
}

export interface UploadSnapshot {
  readonly items: readonly UploadItem[];
  readonly counts: Readonly<Record<UploadState, number>>;
  /** Of everything not cancelled. */
  readonly totalBytes: number;
  readonly sentBytes: number;
  /** Over the last seconds; null: not known yet, or nothing is being sent. */
  readonly bytesPerSecond: number | null;
  readonly secondsLeft: number | null;
  readonly hold: Hold | null;
}

/** What stopped a transfer. */
export type TransferFailure =
  | { readonly kind: "signed-out" }
  | { readonly kind: "no-answer" }
  | { readonly kind: "full"; readonly message: string }
  | { readonly kind: "refused"; readonly message: string };

export interface TransferEvents {
  readonly onProgress: (sentBytes: number) => void;
  readonly onDone: () => void;
  readonly onFailure: (failure: TransferFailure) => void;
}

/** One file on its way. `start` after `pause` goes on where it stood. */
export interface Transfer {
  readonly start: () => void;
  readonly pause: () => void;
  /** Stops and has the server forget what it received. */
  readonly cancel: () => void;
}

export type MakeTransfer = (file: OutgoingFile, events: TransferEvents) => Transfer;

interface Entry {
  item: UploadItem;
  transfer: Transfer | null;
}

/** A browser has six connections to a host; pages, pictures and events need the others. */
const MOST_AT_ONCE = 3;
/** Progress of hundreds of files is told a few times a second, not for every chunk. */
const TELL_EVERY_MS = 200;
const TRY_AGAIN_MS = 5_000;
const RATE_WINDOW_MS = 8_000;

const EMPTY_COUNTS: Readonly<Record<UploadState, number>> = {
  waiting: 0,
  sending: 0,
  done: 0,
  failed: 0,
  cancelled: 0,
};

/**
 * Sends files, three at a time, and keeps account of each. Knows nothing of pages: it lives as long as the tab.
 * A session that ends, a lost connection or a full disk hold everything; a refused file stops nothing else.
 */
export class UploadQueue {
  #entries: Entry[] = [];
  #hold: Hold | null = null;
  #listeners = new Set<() => void>();
  #samples: { atMs: number; bytes: number }[] = [];
  #snapshot: UploadSnapshot;
  #tellTimer: ReturnType<typeof setTimeout> | null = null;
  #retryTimer: ReturnType<typeof setTimeout> | null = null;
  #nextId = 1;

  constructor(
    private readonly makeTransfer: MakeTransfer,
    private readonly now: () => number = () => performance.now(),
  ) {
    this.#snapshot = this.#summarise();
  }

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** The same object until something changed. */
  getSnapshot = (): UploadSnapshot => this.#snapshot;

  add(files: readonly OutgoingFile[]): void {
    for (const file of files) {
      const item: UploadItem = { id: this.#nextId, file, state: "waiting", sentBytes: 0, message: null };
      this.#nextId += 1;
      this.#entries.push({ item, transfer: null });
    }
    this.#fill();
  }

  cancel(id: number): void {
    const entry = this.#find(id);
    if (entry) this.#cancel(entry);
    this.#fill();
  }

  /** Cancels what is not in yet. What the server has recorded stays. */
  cancelAll(): void {
    for (const entry of this.#entries) this.#cancel(entry);
    this.#fill();
  }

  retry(id: number): void {
    const entry = this.#find(id);
    if (entry) this.#requeue(entry);
    this.#fill();
  }

  retryAll(): void {
    for (const entry of this.#entries) this.#requeue(entry);
    this.#fill();
  }

  /** Takes what is done and cancelled off the list. */
  clear(): void {
    this.#entries = this.#entries.filter(({ item }) => item.state !== "done" && item.state !== "cancelled");
    this.#tell();
  }

  /** The connection is gone: everything waits, nothing is lost. */
  goOffline(): void {
    this.#holdAll({ kind: "offline", message: "No connection. It goes on by itself as soon as there is one." });
  }

  /** Tries again after a hold of any kind. */
  goOn(): void {
    if (this.#retryTimer !== null) clearTimeout(this.#retryTimer);
    this.#retryTimer = null;
    this.#hold = null;
    this.#fill();
  }

  isUnfinished(): boolean {
    return this.#entries.some(({ item }) => item.state === "waiting" || item.state === "sending");
  }

  #find(id: number): Entry | undefined {
    return this.#entries.find(({ item }) => item.id === id);
  }

  #cancel(entry: Entry): void {
    if (entry.item.state === "done" || entry.item.state === "cancelled") return;
    entry.transfer?.cancel();
    entry.transfer = null;
    this.#change(entry, { state: "cancelled", sentBytes: 0, message: null });
  }

  #requeue(entry: Entry): void {
    if (entry.item.state === "failed") this.#change(entry, { state: "waiting", message: null });
  }

  #fill(): void {
    let sending = this.#entries.filter(({ item }) => item.state === "sending").length;
    for (const entry of this.#entries) {
      if (this.#hold !== null || sending >= MOST_AT_ONCE) break;
      if (entry.item.state !== "waiting") continue;
      sending += 1;
      this.#start(entry);
    }
    this.#tell();
  }

  #start(entry: Entry): void {
    this.#change(entry, { state: "sending" });
    entry.transfer ??= this.makeTransfer(entry.item.file, {
      onProgress: (sentBytes) => {
        if (entry.item.state === "sending") this.#change(entry, { sentBytes });
      },
      onDone: () => {
        if (entry.item.state === "cancelled") return;
        this.#change(entry, { state: "done", sentBytes: entry.item.file.bytes, message: null });
        entry.transfer = null;
        this.#fill();
      },
      onFailure: (failure) => this.#fail(entry, failure),
    });
    entry.transfer.start();
  }

  #fail(entry: Entry, failure: TransferFailure): void {
    if (entry.item.state !== "sending") return;
    if (failure.kind === "refused") {
      entry.transfer = null;
      this.#change(entry, { state: "failed", message: failure.message });
      this.#fill();
      return;
    }
    this.#holdAll(holdFor(failure));
    if (failure.kind === "no-answer") {
      if (this.#retryTimer !== null) clearTimeout(this.#retryTimer);
      this.#retryTimer = setTimeout(() => this.goOn(), TRY_AGAIN_MS);
    }
  }

  #holdAll(hold: Hold): void {
    this.#hold = hold;
    this.#samples = [];
    for (const entry of this.#entries) {
      if (entry.item.state !== "sending") continue;
      entry.transfer?.pause();
      this.#change(entry, { state: "waiting" });
    }
    this.#tell();
  }

  #change(entry: Entry, change: Partial<UploadItem>): void {
    entry.item = { ...entry.item, ...change };
    this.#tell();
  }

  #tell(): void {
    this.#tellTimer ??= setTimeout(() => {
      this.#tellTimer = null;
      this.#snapshot = this.#summarise();
      for (const listener of this.#listeners) listener();
    }, TELL_EVERY_MS);
  }

  #summarise(): UploadSnapshot {
    const items = this.#entries.map(({ item }) => item);
    const counts = { ...EMPTY_COUNTS };
    let totalBytes = 0;
    let sentBytes = 0;
    for (const item of items) {
      counts[item.state] += 1;
      if (item.state === "cancelled" || item.state === "failed") continue;
      totalBytes += item.file.bytes;
      sentBytes += item.sentBytes;
    }
    const bytesPerSecond = counts.sending > 0 ? this.#rate(sentBytes) : null;
    const secondsLeft = bytesPerSecond ? (totalBytes - sentBytes) / bytesPerSecond : null;
    return { items, counts, totalBytes, sentBytes, bytesPerSecond, secondsLeft, hold: this.#hold };
  }

  #rate(sentBytes: number): number | null {
    const atMs = this.now();
    this.#samples = [
      ...this.#samples.filter((sample) => atMs - sample.atMs <= RATE_WINDOW_MS),
      { atMs, bytes: sentBytes },
    ];
    const [oldest] = this.#samples;
    if (!oldest || atMs - oldest.atMs < 1000) return null;
    return Math.max(0, ((sentBytes - oldest.bytes) * 1000) / (atMs - oldest.atMs));
  }
}

function holdFor(failure: Exclude<TransferFailure, { kind: "refused" }>): Hold {
  if (failure.kind === "signed-out")
    return { kind: "signed-out", message: "Your session has ended. Sign in again to go on." };
  if (failure.kind === "full") return { kind: "full", message: failure.message };
  return { kind: "offline", message: "No answer from the server. It is tried again every few seconds." };
}
