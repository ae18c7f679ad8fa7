import { mkdir, writeFile } from "node:fs/promises";
import path from "node:path";
import { pretendShoot, type PretendFrame, toSortFrame } from "./accuracy/pretend-shoot";
import { uploadFile } from "./uploads";
import { accessForJob } from "@/lib/auth/gate";
import { listIntakeFiles } from "@/lib/frames/reads";
import { recordAnalysis } from "@/lib/frames/writes";
import type { ProjectId } from "@/lib/ids";
import { encodeRegistration } from "@/lib/imaging/registration-file";
import { createSortProjectHandler } from "@/lib/jobs/handlers/sort-project";
import { claimJob, finishJob } from "@/lib/jobs/queue";
import { sortFrames } from "@/lib/sorting/sort-frames";
import { registrationPath } from "@/lib/storage/paths";

/** Of the registration pictures, px; frames are 3000 x 2000. */
const SIZE = { widthPx: 256, heightPx: 171 };
const SCALE = SIZE.widthPx / 3000;
const SCENE = { widthPx: 1024, heightPx: 768 };

/** Rows of tiles of 4 frames that overlap by 3/8, walked row by row. */
export function planShots(rows: number, columns: number): PretendFrame[] {
  const order = { along: "rows", from: "top-left", turns: false } as const;
  return pretendShoot({ rows, columns, framesPerTile: 4, order, overlap: 0.375 });
}

/** Frames that were shot of one scene, stored and analysed: what the worker's readers would have left behind. */
export async function bringInShots(projectId: ProjectId, shots: readonly PretendFrame[]): Promise<void> {
  const access = accessForJob({ projectId });
  const known = new Map(shots.map((shot, at) => [shot.name, { shot, frame: toSortFrame(shot, at) }]));
  for (const { name } of shots) await uploadFile(projectId, name, Buffer.from(`${projectId} ${name}`));
  for (const file of await listIntakeFiles(access)) {
    const found = known.get(file.name);
    if (!found || file.state !== "received") continue;
    const { metadata, measurements } = found.frame;
    await mkdir(path.dirname(registrationPath(file.id)), { recursive: true });
    await writeFile(registrationPath(file.id), encodeRegistration(viewOf(found.shot)));
    const result = { type: "picture", sha256: `sha of ${file.name}`, mediaType: "image/jpeg" } as const;
    await recordAnalysis(access, file.id, { ...result, metadata, measurements }, Date.now());
  }
}

/** Runs the sorting that was asked for. */
export async function sortNow(): Promise<void> {
  const job = await claimJob("sort-project", Date.now() + 60_000);
  if (!job) throw new Error("no sorting was asked for");
  const outcome = await createSortProjectHandler(sortFrames).run(job, new AbortController().signal);
  if (outcome.type !== "done") throw new Error("the sorting was put off");
  await finishJob(job, Date.now());
}

/** Blotches of a few pixels, the same in every run. */
const scene = (() => {
  const { widthPx, heightPx } = SCENE;
  let state = 12345;
  const noise = Float64Array.from({ length: widthPx * heightPx }, () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  });
  return Uint16Array.from(noise, (_, at) => {
    let sum = 0;
    for (const down of [0, 1, 2]) for (const right of [0, 1, 2]) sum += noise[at + down * widthPx + right] ?? 0.5;
    return Math.round((sum / 9) * 65_535);
  });
})();

function viewOf({ at }: PretendFrame) {
  const [left, top] = [Math.round((at?.xPx ?? 0) * SCALE) + 8, Math.round((at?.yPx ?? 0) * SCALE) + 8];
  const data = new Uint16Array(SIZE.widthPx * SIZE.heightPx);
  for (let y = 0; y < SIZE.heightPx; y++) {
    const from = (top + y) * SCENE.widthPx + left;
    data.set(scene.subarray(from, from + SIZE.widthPx), y * SIZE.widthPx);
  }
  return { data, ...SIZE };
}
