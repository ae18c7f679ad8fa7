import { makeCamera } from "@/scripts/demo/camera";
import { makeRandom, mixSeeds } from "@/scripts/demo/seeded-random";
import { writeFrame } from "@/scripts/demo/write-frame";
import { makeScene } from "./scene";

const SIZE = { widthPx: 6000, heightPx: 4000 };
/** Drawn in bands, or the camera's own buffers alone would take 600 MB. */
const BANDS = 8;
/** Room for the tripod's jitter. */
const MARGIN_PX = 40;
/** Noise as at ISO 400; with this quality a file comes to 8 to 12 MB like a real one. */
const NOISE_LEVELS = 4.8;
const QUALITY = 95;

/**
 * Writes frames of one tile at the size of a 24-megapixel camera, for measuring speed and memory.
 * @param count - how many; each takes a second or two
 * @returns the files' names below `directory`, in the order taken
 */
export async function make24MpFrames(directory: string, count: number, seed: number): Promise<string[]> {
  const sceneSize = { widthPx: SIZE.widthPx + 2 * MARGIN_PX, heightPx: SIZE.heightPx + 2 * MARGIN_PX };
  const scene = await makeScene("landscape", sceneSize, seed, 0.2);
  const bandSize = { widthPx: SIZE.widthPx, heightPx: SIZE.heightPx / BANDS };
  const camera = makeCamera(scene.raster, bandSize);
  const random = makeRandom(mixSeeds(seed, 3));
  const files: string[] = [];
  for (let index = 0; index < count; index++) {
    const centreXPx = sceneSize.widthPx / 2 + random.normal() * 3;
    const topPx = MARGIN_PX + random.normal() * 3;
    const bands = Array.from({ length: BANDS }, (_, band) =>
      camera.expose({
        pose: {
          centreXPx,
          centreYPx: topPx + (band + 0.5) * bandSize.heightPx,
          rollRad: 0,
          zoom: 1,
          distortion: 0,
          sphere: null,
        },
        softSigmaPx: 0,
        motion: null,
        gainEv: 0,
        shadingEv: 0,
        noiseLevels: NOISE_LEVELS,
        noiseSeed: mixSeeds(seed, index, band),
      }),
    );
    const file = `100LARGE/LARG${String(index + 1).padStart(4, "0")}.JPG`;
    await writeFrame(directory, frameFile(file, index), {
      pixels: Buffer.concat(bands),
      size: SIZE,
      quality: QUALITY,
    });
    files.push(file);
  }
  return files;
}

function frameFile(file: string, index: number) {
  const localMs = Date.UTC(2027, 3, 18, 9, 41, 12) + index * 1_500;
  return {
    file,
    orientation: 1 as const,
    modifiedMs: localMs,
    exif: {
      localMs,
      hasFraction: true,
      offsetMinutes: 120,
      make: "Aldmoor",
      model: "Aldmoor F2",
      serial: "4402117",
      lens: "Aldmoor 70-200 mm f/4",
      exposure: "1/250",
      aperture: 8,
      iso: 400,
      focalLengthMm: 105,
    },
  };
}
