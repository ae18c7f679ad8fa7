import { makeRandom, mixSeeds } from "@/scripts/demo/seeded-random";
import type { FrameExif } from "@/scripts/demo/write-frame";
import type { PlannedShot, ShootPlan } from "./plan-shoot";

interface NamedShot {
  readonly shot: PlannedShot;
  readonly file: string;
  readonly exif: FrameExif | null;
  /** The camera's clock as if it were UTC, ms. */
  readonly clockMs: number;
}

const BODIES = [
  { make: "Aldmoor", model: "Aldmoor F2", serial: "4402117", prefix: "ALDM", folder: "ALDMR" },
  { make: "Aldmoor", model: "Aldmoor F2 II", serial: "5519083", prefix: "_LDN", folder: "NORTH" },
] as const;

/** 18 April 2027, 09:41:12 by the first body's clock. */
const START_MS = Date.UTC(2027, 3, 18, 9, 41, 12, 340);

/** Exposure times, s, a third of a stop apart around the one that gives no deviation; index 5 is 1/250. */
const EXPOSURES = ["1/800", "1/640", "1/500", "1/400", "1/320", "1/250", "1/200", "1/160", "1/125", "1/100", "1/80"];

/** Gives every shot what its camera would: folder and counter by DCF, and the time by the camera's own clock. */
export function nameFiles(plan: ShootPlan, seed: number): NamedShot[] {
  const { recipe } = plan;
  const random = makeRandom(mixSeeds(seed, 51));
  const counters = BODIES.map(() =>
    recipe.rollsOver ? 10_000 - Math.ceil(plan.shots.length / 2) : random.whole(1, 9_000),
  );
  const folders = BODIES.map(() => random.whole(100, 140));
  const jumps = Array.from({ length: recipe.clockJumps }, () => ({
    at: random.whole(1, Math.max(1, plan.shots.length - 1)),
    ms: random.pick([-3_600_000, 3_600_000, -86_400_000, 1_234_000, -95_000]),
  }));
  return plan.shots.map((shot, i) => {
    const body = BODIES[shot.body] ?? BODIES[0];
    let counter = counters[shot.body] ?? 1;
    if (counter > 9_999) {
      counter = 1;
      folders[shot.body] = (folders[shot.body] ?? 100) + 1;
    }
    counters[shot.body] = counter + 1;
    const jumpedMs = jumps.reduce((sum, jump) => sum + (i >= jump.at ? jump.ms : 0), 0);
    const clockMs = START_MS + shot.trueMs + jumpedMs + (shot.body === 1 ? recipe.clockDifferenceSeconds * 1000 : 0);
    const hasExif = recipe.exifPart >= 1 || random.chance(recipe.exifPart);
    return {
      shot,
      file: `${folders[shot.body]}${body.folder}/${body.prefix}${String(counter).padStart(4, "0")}.JPG`,
      clockMs,
      exif: hasExif
        ? {
            localMs: clockMs,
            hasFraction: recipe.hasFraction,
            offsetMinutes: 120,
            make: body.make,
            model: body.model,
            serial: body.serial,
            lens: "Aldmoor 70-200 mm f/4",
            exposure: EXPOSURES[5 + Math.round(shot.exposureEv * 3)] ?? "1/250",
            aperture: 8,
            iso: 100,
            focalLengthMm: 105 * shot.pose.zoom,
          }
        : null,
    };
  });
}

export function rawNameOf(file: string): string {
  return file.replace(/\.JPG$/, ".RAW");
}
