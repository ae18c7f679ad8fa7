import { existsSync } from "node:fs";
import { mkdtemp, rename, rm } from "node:fs/promises";
import path from "node:path";
import { readFile, writeFile } from "node:fs/promises";
import { generateShoot } from "@/tests/support/shoots/generate-shoot";
import type { ShootTruth } from "@/tests/support/shoots/shoot-truth";

export interface Shoot {
  /** Holds nothing but the frames. */
  readonly folder: string;
  readonly truth: ShootTruth;
}

/** Small enough to draw and to measure in seconds; 12 tiles in 3 rows of 4, 6 frames each. */
const KIND = "walk-rows-turning-top-left";
const SEED = 7;
const SIZE = { widthPx: 600, heightPx: 400 };

/** The shoot that the tests bring in, or one of another kind (tests/support/shoots/kinds.ts), drawn once a run. */
export async function getShoot(kind = KIND, seed = SEED): Promise<Shoot> {
  const base = path.join(process.env.E2E_STORAGE_DIR ?? "", `shoot-${kind}-${seed}`);
  const folder = path.join(base, "frames");
  const truthFile = path.join(base, "truth.json");
  if (!existsSync(truthFile)) {
    const draft = await mkdtemp(`${base}-`);
    const truth = await generateShoot(kind, seed, path.join(draft, "frames"), SIZE);
    await writeFile(path.join(draft, "truth.json"), JSON.stringify(truth));
    await rm(base, { recursive: true, force: true });
    await rename(draft, base);
  }
  return { folder, truth: JSON.parse(await readFile(truthFile, "utf8")) };
}
