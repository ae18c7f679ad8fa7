import { availableParallelism } from "node:os";
import { Worker } from "node:worker_threads";
import { type DemoTruth, planDemo } from "./demo-plan";
import { drawHarbour } from "./harbour/draw-harbour";
import type { TakeFrames } from "./take-frames-thread";

/** A frame that is on the disk, whole. */
export interface WrittenFrame {
  /** Below the shoot's directory, "/" between names. */
  readonly file: string;
  readonly total: number;
}

const DEFAULT_SEED = 1;
/** Each holds 40 MB of buffers, and the product has work of its own. */
const MOST_THREADS = 4;

/**
 * Makes the demo's shoot: 108 JPEG files of an invented harbour, as a camera would have left them on its card.
 * 3 rows of 6 tiles with one hole, one thin seam, a few soft frames, a stray, and the counter rolling over.
 * @param directory - made where it is missing; files go into two DCF folders below it
 * @param onWritten - called for each frame as it is there
 * @returns what the files show, in the order taken
 */
export async function makeDemoShoot(
  directory: string,
  onWritten: (frame: WrittenFrame) => void = () => {},
  seed: number = DEFAULT_SEED,
): Promise<DemoTruth> {
  const truth = planDemo(seed);
  const total = truth.frames.length;
  // They start up while the scene is drawn.
  const threads = Array.from({ length: Math.min(MOST_THREADS, availableParallelism()) }, startThread);
  try {
    const scene = await drawHarbour(seed);
    const task: TakeFrames = { directory, seed, scene, next: new Int32Array(new SharedArrayBuffer(4)) };
    await Promise.all(threads.map((thread) => takeFrames(thread, task, (file) => onWritten({ file, total }))));
  } finally {
    await Promise.all(threads.map(({ worker }) => worker.terminate()));
  }
  return truth;
}

interface Thread {
  readonly worker: Worker;
  /** Settles when it has ended: of itself, or by what went wrong in it. */
  readonly ended: Promise<void>;
}

function startThread(): Thread {
  const worker = new Worker(new URL("./thread.mjs", import.meta.url));
  const ended = new Promise<void>((resolve, reject) => {
    worker.once("error", reject);
    worker.once("exit", (code) => (code === 0 ? resolve() : reject(new Error("a thread that draws the demo ended"))));
  });
  // Told of where it is awaited, once the scene is drawn.
  ended.catch(() => undefined);
  return { worker, ended };
}

/** Lets one thread take frames until none is left. */
async function takeFrames({ worker, ended }: Thread, task: TakeFrames, onWritten: (file: string) => void) {
  worker.on("message", onWritten);
  worker.postMessage(task);
  await ended;
}
