import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import sharp from "sharp";

import { analysePicture } from "@/lib/imaging/analyse-picture";
import { median } from "@/lib/sorting/robust";
import { make24MpFrames } from "@/tests/support/shoots/make-24mp-frames";
import { analyseFiles } from "../sort/analyse-files";
import { collectFiles } from "../sort/collect-files";

const FRAMES = 4;
const ROUNDS = 3;

/** Times of 24 MP frames in one run: a plain decode, the whole pass, and frames a second through the pool. */
export async function measureSpeed(jobs: number): Promise<string[][]> {
  const folder = await mkdtemp(path.join(tmpdir(), "stackyard-bench-"));
  try {
    await make24MpFrames(folder, FRAMES, 1);
    const { pictures } = await collectFiles(folder);
    const plain: number[] = [];
    const pass: number[] = [];
    for (let round = 0; round < ROUNDS; round++) {
      for (const [at, { path: file, name }] of pictures.entries()) {
        plain.push(await timed(() => sharp(file).raw().toBuffer()));
        const outputs = {
          previewPath: path.join(folder, `${at}.preview`),
          thumbnailPath: path.join(folder, `${at}.thumbnail`),
          registrationPath: path.join(folder, `${at}.registration`),
        };
        pass.push(await timed(() => analysePicture({ path: file, name, ...outputs })));
      }
    }
    const pooled = await timed(() => analyseFiles(pictures, { jobs, registrationFolder: folder, onRead: () => {} }));
    return [
      ["plain decode of a 24 MP JPEG, median", `${median(plain).toFixed(0)} ms`],
      ["whole pass with preview and thumbnail, median", `${median(pass).toFixed(0)} ms`],
      ["ratio of the pass to the plain decode", (median(pass) / median(plain)).toFixed(2)],
      [
        `frames a second, ${jobs} readers (start of the readers included)`,
        ((1000 * pictures.length) / pooled).toFixed(2),
      ],
    ];
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

async function timed(work: () => Promise<unknown>): Promise<number> {
  const started = performance.now();
  await work();
  return performance.now() - started;
}
