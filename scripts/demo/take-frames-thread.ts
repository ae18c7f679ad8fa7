// A thread that takes frames of the demo: told of the scene once, it goes on until no frame is left.
import { parentPort } from "node:worker_threads";
import { makeDemoCamera, writeDemoFrame } from "./demo-frame";
import { planDemo } from "./demo-plan";
import type { Raster } from "./raster";

export interface TakeFrames {
  readonly directory: string;
  readonly seed: number;
  /** Its pixels are shared between the threads. */
  readonly scene: Raster;
  /** Shared: the number of the next frame that nobody has taken. */
  readonly next: Int32Array;
}

async function takeFrames({ directory, seed, scene, next }: TakeFrames): Promise<void> {
  const { frames } = planDemo(seed);
  const camera = makeDemoCamera(scene, seed);
  let writing: Promise<void> | undefined;
  for (;;) {
    const index = Atomics.add(next, 0, 1);
    const frame = frames[index];
    if (!frame) break;
    const pixels = camera.take(frame, index);
    // The next frame is taken while this one is encoded on sharp's own threads.
    await writing;
    writing = writeDemoFrame(directory, frame, pixels).then(() => parentPort?.postMessage(frame.file));
  }
  await writing;
}

parentPort?.once("message", (task: TakeFrames) => {
  // What is thrown becomes the thread's "error".
  void takeFrames(task);
});
