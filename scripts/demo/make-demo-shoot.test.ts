import { spawn } from "node:child_process";
import { createHash } from "node:crypto";
import { mkdtemp, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";
import exifr from "exifr";
import { afterAll, beforeAll, expect, test } from "vitest";
import type { Manifest } from "@/lib/handover/manifest-types";
import { assertManifest } from "@/lib/handover/validate-manifest";
import { type DemoFrame, type DemoTruth, planDemo } from "./demo-plan";
import { makeDemoShoot } from "./make-demo-shoot";

let directory = "";
let truth: DemoTruth;
const written: string[] = [];

beforeAll(async () => {
  directory = await mkdtemp(path.join(tmpdir(), "demo-"));
  truth = await makeDemoShoot(directory, ({ file }) => written.push(file));
}, 300_000);
afterAll(() => rm(directory, { recursive: true, force: true }));

test("the demo has 108 frames over 17 of 18 tiles, 4 to 8 each, and one stray", () => {
  expect(truth.frames).toHaveLength(108);
  const counts = new Map<string, number>();
  for (const { place } of truth.frames) {
    if (place) counts.set(`${place.row}/${place.column}`, (counts.get(`${place.row}/${place.column}`) ?? 0) + 1);
  }
  expect(counts.size).toBe(17);
  expect(counts.has(`${truth.hole.row}/${truth.hole.column}`)).toBe(false);
  expect(Math.min(...counts.values())).toBe(4);
  expect(Math.max(...counts.values())).toBe(8);
  expect(truth.frames.filter(({ place }) => place === null)).toHaveLength(1);
  expect(truth.frames.filter(({ softSigmaPx }) => softSigmaPx > 0).length).toBeGreaterThan(2);
});

test("its counter rolls over into the next folder", () => {
  const names = truth.frames.map(({ file }) => file);
  // DCF (CIPA DC-009): 0001 to 9999, then the next folder.
  expect(names[names.indexOf("100HARB/HARB9999.JPG") + 1]).toBe("101HARB/HARB0001.JPG");
  expect(new Set(names).size).toBe(108);
});

test("its frames are 1 to 2 s apart, its tiles 8 s and more", () => {
  for (const [index, frame] of truth.frames.entries()) {
    const before = truth.frames[index - 1];
    if (!before) continue;
    const pauseSeconds = (frame.localMs - before.localMs) / 1000;
    const isSameTile =
      before.place !== null &&
      frame.place !== null &&
      before.place.row === frame.place.row &&
      before.place.column === frame.place.column;
    if (isSameTile) expect(pauseSeconds).toBeLessThanOrEqual(2);
    else expect(pauseSeconds).toBeGreaterThanOrEqual(8);
  }
});

test("every file carries the time that the truth says", async () => {
  for (const { file, localMs } of truth.frames.filter((_, index) => index % 20 === 0)) {
    const tags = await exifr.parse(path.join(directory, file), { reviveValues: false });
    const time = `${String(tags.DateTimeOriginal).replace(":", "-").replace(":", "-").replace(" ", "T")}.${tags.SubSecTimeOriginal}Z`;
    expect(Math.abs(Date.parse(time) - localMs)).toBeLessThan(10);
    expect(tags.OffsetTimeOriginal).toBe("+02:00");
    expect([tags.ExifImageWidth, tags.ExifImageHeight]).toEqual([1500, 1000]);
  }
});

test("no two files are the same, and progress ends with the last frame", async () => {
  const hashes = await Promise.all(
    truth.frames.map(async ({ file }) =>
      createHash("sha256")
        .update(await readFile(path.join(directory, file)))
        .digest("hex"),
    ),
  );
  expect(new Set(hashes).size).toBe(108);
  expect(new Set(written)).toEqual(new Set(truth.frames.map(({ file }) => file)));
  expect(written).toHaveLength(108);
});

test("the same seed plans the same demo", () => {
  expect(planDemo(1)).toEqual(truth);
  expect(planDemo(2)).not.toEqual(truth);
});

/** What `npm run sort` makes of the demo's folder. */
async function sortDemo(): Promise<Manifest> {
  const root = fileURLToPath(new URL("../..", import.meta.url));
  const out = path.join(directory, "manifest.json");
  const code = await new Promise((resolve, reject) => {
    const args = ["run", "--silent", "--prefix", root, "sort", "--", directory, "--out", out];
    spawn("npm", args, { stdio: "ignore" }).on("error", reject).on("close", resolve);
  });
  expect(code).toBe(0);
  const manifest: Manifest = JSON.parse(await readFile(out, "utf8"));
  await rm(out);
  assertManifest(manifest);
  return manifest;
}

test("sorted, the demo is what its truth says", { timeout: 300_000 }, async () => {
  const manifest = await sortDemo();
  const truthOf = new Map<string, DemoFrame>(truth.frames.map((frame) => [frame.file, frame]));
  const known = manifest.frames.map((frame) => {
    const [file] = frame.files;
    const real = truthOf.get(`${file?.folder}/${file?.name}`);
    if (!real) throw new Error(`no truth for ${file?.name}`);
    return { frame, real };
  });
  expect(known).toHaveLength(truth.frames.length);
  expect(
    known
      .filter(
        ({ frame, real }) => frame.row !== (real.place?.row ?? null) || frame.column !== (real.place?.column ?? null),
      )
      .map(({ real }) => real.file),
  ).toEqual([]);
  expect(manifest.grid).toMatchObject({ rows: truth.rows, columns: truth.columns, holes: ["B5"] });
  expect(manifest.grid.shotOrder).toEqual({ along: "rows", from: "top-left", turns: true });

  const soft = (isSoft: (one: (typeof known)[number]) => boolean) => known.filter(isSoft).map(({ real }) => real.file);
  expect(soft(({ frame }) => frame.setAside === "soft")).toEqual(soft(({ real }) => real.softSigmaPx > 0));
  expect(known.filter(({ frame }) => frame.setAside !== null && frame.setAside !== "soft")).toEqual([]);

  const { row, column, overlap } = truth.thinSeam;
  const thin = manifest.stacks.find((stack) => stack.row === row && stack.column === column);
  // analysis.md, targets: 0.5 % of the side.
  expect(Math.abs((thin?.overlap.right ?? -1) - overlap)).toBeLessThan(0.005);
  expect(manifest.toSettle.map(({ kind }) => kind)).toEqual(expect.arrayContaining(["hole", "thin-seam"]));

  const poseOf = new Map(known.map(({ frame, real }) => [frame.id, real.pose]));
  const references = new Map(manifest.stacks.map((stack) => [stack.id, poseOf.get(stack.reference ?? "")]));
  for (const { frame, real } of known) {
    const reference = references.get(frame.stack ?? "");
    if (!reference || !frame.shift) continue;
    // The manifest's sense: a camera pointed further right gives x above 0. Measured at 256 px of 1 500.
    expect(Math.abs(frame.shift.x - (real.pose.centreXPx - reference.centreXPx))).toBeLessThan(1.5);
    expect(Math.abs(frame.shift.y - (real.pose.centreYPx - reference.centreYPx))).toBeLessThan(1.5);
  }
});
