import { type Camera, makeCamera } from "./camera";
import { DEMO_FRAME_SIZE, type DemoFrame, type DemoTruth, planDemo } from "./demo-plan";
import { drawCobbles } from "./harbour/cobbles";
import { drawHarbour } from "./harbour/draw-harbour";
import { mixSeeds } from "./seeded-random";
import { writeFrame } from "./write-frame";

/** A frame that is on the disk, whole. */
export interface WrittenFrame {
  /** Below the shoot's directory, "/" between names. */
  readonly file: string;
  readonly total: number;
}

const DEFAULT_SEED = 1;
const SHADING_EV = 0.22;
const NOISE_LEVELS = 2.4;

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
  const scene = await drawHarbour(seed);
  const camera = makeCamera(scene, DEMO_FRAME_SIZE);
  const strayCamera = makeCamera(drawCobbles(DEMO_FRAME_SIZE, seed), DEMO_FRAME_SIZE);
  const writing: Promise<Buffer>[] = [];
  for (const [index, frame] of truth.frames.entries()) {
    // One frame is drawn while the two before it are encoded on sharp's own threads.
    await writing[writing.length - 2];
    const pixels = expose(frame.place ? camera : strayCamera, frame, mixSeeds(seed, 911, index));
    writing.push(
      writeDemoFrame(directory, frame, pixels).then((bytes) => {
        onWritten({ file: frame.file, total });
        return bytes;
      }),
    );
  }
  await Promise.all(writing);
  return truth;
}

function expose(camera: Camera, frame: DemoFrame, noiseSeed: number): Buffer {
  const pose = frame.place
    ? frame.pose
    : { ...frame.pose, centreXPx: camera.size.widthPx / 2, centreYPx: camera.size.heightPx / 2 };
  return camera.expose({
    pose,
    softSigmaPx: frame.motion ? 0 : frame.softSigmaPx,
    motion: frame.motion,
    gainEv: frame.lightEv,
    shadingEv: SHADING_EV,
    noiseLevels: NOISE_LEVELS,
    noiseSeed,
  });
}

function writeDemoFrame(directory: string, frame: DemoFrame, pixels: Buffer): Promise<Buffer> {
  return writeFrame(
    directory,
    {
      file: frame.file,
      orientation: 1,
      modifiedMs: frame.localMs,
      exif: {
        localMs: frame.localMs,
        hasFraction: true,
        offsetMinutes: 120,
        make: "Aldmoor",
        model: "Aldmoor F2",
        serial: "4402117",
        lens: "Aldmoor 70-200 mm f/4",
        exposure: "1/250",
        aperture: 8,
        iso: 100,
        focalLengthMm: 105,
      },
    },
    { pixels, size: DEMO_FRAME_SIZE },
  );
}
