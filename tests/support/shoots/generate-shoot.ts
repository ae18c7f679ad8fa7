import { makeCamera } from "@/scripts/demo/camera";
import type { FrameSize } from "@/scripts/demo/pose";
import { makeRandom, mixSeeds } from "@/scripts/demo/seeded-random";
import { writeFileWithTime, writeFrame } from "@/scripts/demo/write-frame";
import { drawLandscape } from "./landscape";
import { makeMovers, paintMovers } from "./movement";
import { nameFiles, rawNameOf } from "./name-files";
import { type PlannedShot, planShoot, type ShootPlan } from "./plan-shoot";
import { makeScene, type Scene } from "./scene";
import type { FrameTruth, ShootTruth } from "./shoot-truth";
import { truthOf } from "./truth-of";

/** Quick to make and to measure, and large enough that a blur of 0.7 px shows. */
const DEFAULT_SIZE: FrameSize = { widthPx: 1200, heightPx: 800 };

/**
 * Makes a shoot whose truth is known: real JPEG files with EXIF below `directory`.
 * @param kind - one of `SHOOT_KINDS`
 * @param seed - whole number; same kind, seed and size: same bytes. `seed % 3` chooses the scene
 *   (landscape, city, photograph) where the kind leaves it open
 * @param directory - made where it is missing; files go into DCF folders below it
 * @param size - of a stored frame; kinds about the number of tiles have a size of their own
 * @throws where the kind is unknown
 */
export async function generateShoot(
  kind: string,
  seed: number,
  directory: string,
  size: FrameSize = DEFAULT_SIZE,
): Promise<ShootTruth> {
  const plan = planShoot(kind, seed, size);
  const scene = await makeScene(plan.recipe.scene, plan.sceneSize, mixSeeds(seed, 3), plan.recipe.skyPart);
  const named = nameFiles(plan, seed);
  const expose = makeExposer(plan, scene, seed);
  const writing: Promise<Buffer>[] = [];
  for (const { shot, file, exif, clockMs } of named) {
    // One frame is drawn while the two before it are encoded on sharp's own threads.
    await writing[writing.length - 2];
    const picture = turnForStorage(expose(shot, writing.length), plan.size, plan.recipe.portrait);
    writing.push(
      writeFrame(directory, { file, exif, orientation: plan.recipe.portrait ?? 1, modifiedMs: clockMs }, picture),
    );
  }
  const written = await Promise.all(writing);
  if (plan.recipe.hasRawBeside) {
    for (const { file, clockMs } of named) {
      await writeFileWithTime(directory, { file: rawNameOf(file), modifiedMs: clockMs }, rawBytes(seed, file));
    }
  }
  const copies = await writeCopies(plan, named, written, { directory, seed });
  return truthOf({ kind, seed, plan, named, copies, scene });
}

/** Not a picture: what a program sees that cannot read this camera's raw files. */
function rawBytes(seed: number, file: string): Buffer {
  const random = makeRandom(mixSeeds(seed, ...Buffer.from(file)));
  return Buffer.from(Uint8Array.from({ length: 4_096 }, () => random.whole(0, 255)));
}

async function writeCopies(
  plan: ShootPlan,
  named: ReturnType<typeof nameFiles>,
  written: readonly Buffer[],
  run: { directory: string; seed: number },
): Promise<Pick<FrameTruth, "file" | "duplicateOf">[]> {
  const random = makeRandom(mixSeeds(run.seed, 61));
  const copies: Pick<FrameTruth, "file" | "duplicateOf">[] = [];
  for (let i = 0; i < plan.recipe.doubledFiles; i++) {
    const chosen = random.whole(0, named.length - 1);
    const original = named[chosen];
    const bytes = written[chosen];
    const file = `copies/${original?.file.split("/").pop()}`;
    if (!original || !bytes || copies.some((copy) => copy.file === file)) continue;
    await writeFileWithTime(run.directory, { file, modifiedMs: original.clockMs }, bytes);
    copies.push({ file, duplicateOf: original.file });
  }
  return copies;
}

function makeExposer(plan: ShootPlan, scene: Scene, seed: number): (shot: PlannedShot, index: number) => Buffer {
  const { recipe, size } = plan;
  const camera = makeCamera(scene.raster, size);
  const movers = recipe.hasMovement ? makeMovers(scene, size, seed) : [];
  let strayCamera: ReturnType<typeof makeCamera> | null = null;
  return (shot, index) => {
    const common = {
      shadingEv: recipe.shadingEv,
      noiseLevels: recipe.noiseLevels,
      noiseSeed: mixSeeds(seed, 71, index),
    };
    if (shot.stray) {
      strayCamera ??= makeCamera(groundScene(size, seed), size);
      return strayCamera.expose({ ...common, ...strayLook(shot, size, index) });
    }
    return camera.expose({
      ...common,
      pose: shot.pose,
      softSigmaPx: shot.motion ? 0 : shot.softSigmaPx,
      motion: shot.motion,
      gainEv: shot.exposureEv + shot.lightEv,
      paint: (pixels) => paintMovers(pixels, movers, { pose: shot.pose, size, scene, seconds: shot.trueMs / 1000 }),
    });
  };
}

/** The ground before the photographer's feet: textured, and nowhere in the grid. */
function groundScene(size: FrameSize, seed: number) {
  const margin = { widthPx: Math.round(size.widthPx * 1.6), heightPx: Math.round(size.heightPx * 1.6) };
  return drawLandscape(margin, mixSeeds(seed, 81), -1).raster;
}

function strayLook(shot: PlannedShot, size: FrameSize, index: number) {
  const random = makeRandom(mixSeeds(index, 91));
  const pose = {
    ...shot.pose,
    centreXPx: size.widthPx * random.between(0.5, 1.1),
    centreYPx: size.heightPx * random.between(0.5, 1.1),
  };
  if (shot.stray === "ground") return { pose, softSigmaPx: 0, motion: null, gainEv: random.between(-0.3, 0.3) };
  // Black: the lens cap or a pocket. Marker: a hand right before the lens, out of focus all over.
  if (shot.stray === "black") return { pose, softSigmaPx: 4, motion: null, gainEv: -12 };
  return { pose, softSigmaPx: size.widthPx / 60, motion: null, gainEv: 0.4 };
}

/** Turns an upright picture to how a camera held on its side stores it. Exif 2.2: 6 needs a quarter turn clockwise to show. */
function turnForStorage(
  upright: Buffer,
  size: FrameSize,
  orientation: 6 | 8 | null,
): { pixels: Buffer; size: FrameSize } {
  if (orientation === null) return { pixels: upright, size };
  const { widthPx, heightPx } = size;
  const stored = Buffer.allocUnsafe(upright.length);
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const storedX = orientation === 6 ? y : heightPx - 1 - y;
      const storedY = orientation === 6 ? widthPx - 1 - x : x;
      const from = (y * widthPx + x) * 3;
      const to = (storedY * heightPx + storedX) * 3;
      stored[to] = upright[from] as number;
      stored[to + 1] = upright[from + 1] as number;
      stored[to + 2] = upright[from + 2] as number;
    }
  }
  return { pixels: stored, size: { widthPx: heightPx, heightPx: widthPx } };
}
