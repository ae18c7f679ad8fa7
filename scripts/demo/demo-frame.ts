import { type Camera, makeCamera } from "./camera";
import { DEMO_FRAME_SIZE, type DemoFrame } from "./demo-plan";
import { drawCobbles } from "./harbour/cobbles";
import type { Raster } from "./raster";
import { mixSeeds } from "./seeded-random";
import { writeFrame } from "./write-frame";

const SHADING_EV = 0.22;
const NOISE_LEVELS = 2.4;

/** Takes the demo's frames, one at a time, in any order: a frame depends on the seed and its number alone. */
export interface DemoCamera {
  /** @returns red, green, blue interleaved */
  take(frame: DemoFrame, index: number): Buffer;
}

export function makeDemoCamera(scene: Raster, seed: number): DemoCamera {
  const camera = makeCamera(scene, DEMO_FRAME_SIZE);
  const strayCamera = () => makeCamera(drawCobbles(DEMO_FRAME_SIZE, seed), DEMO_FRAME_SIZE);
  return { take: (frame, index) => expose(frame.place ? camera : strayCamera(), frame, mixSeeds(seed, 911, index)) };
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

export function writeDemoFrame(directory: string, frame: DemoFrame, pixels: Buffer): Promise<Buffer> {
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
