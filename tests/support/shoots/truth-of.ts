import type { Pose } from "@/scripts/demo/pose";
import { type nameFiles, rawNameOf } from "./name-files";
import type { PlannedShot, ShootPlan } from "./plan-shoot";
import type { Scene } from "./scene";
import { type FrameTruth, overlapBetween, type SeamTruth, type ShootTruth, type StackTruth } from "./shoot-truth";

/** Below this part of its area a tile shows too little land to be told from plain sky. */
const LEAST_LAND_PART = 0.01;

const keyOf = (shot: PlannedShot) => (shot.place ? `${shot.place.row}/${shot.place.column}/${shot.take}` : null);

/** Puts together what is known of a shoot. */
export function truthOf(made: {
  kind: string;
  seed: number;
  plan: ShootPlan;
  named: ReturnType<typeof nameFiles>;
  copies: readonly Pick<FrameTruth, "file" | "duplicateOf">[];
  scene: Scene;
}): ShootTruth {
  const { kind, seed, plan, named, copies, scene } = made;
  const { recipe } = plan;
  const keys = [...new Set(named.flatMap(({ shot }) => keyOf(shot) ?? []))];
  const frames = named.map(({ shot, file, exif }): FrameTruth => {
    const key = keyOf(shot);
    return {
      file,
      stack: key === null ? null : keys.indexOf(key),
      row: shot.place?.row ?? null,
      column: shot.place?.column ?? null,
      take: shot.place ? shot.take : null,
      stray: shot.stray,
      softSigmaPx: shot.softSigmaPx,
      isMotion: shot.motion !== null,
      deviation: shot.deviation,
      gainEv: shot.exposureEv + shot.lightEv,
      duplicateOf: null,
      rawFile: recipe.hasRawBeside ? rawNameOf(file) : null,
      hasExif: exif !== null,
      body: shot.body,
      trueMs: shot.trueMs,
      pose: shot.pose,
    };
  });
  const copied = copies.flatMap((copy) => {
    const original = frames.find(({ file }) => file === copy.duplicateOf);
    return original ? [{ ...original, ...copy, rawFile: null }] : [];
  });
  const stacks = keys.map((_, index) =>
    stackOf(
      frames.filter(({ stack }) => stack === index),
      plan,
      scene,
    ),
  );
  return {
    kind,
    seed,
    scene: recipe.scene,
    rows: recipe.rows,
    columns: recipe.columns,
    size: plan.size,
    shotOrder: recipe.bodies === 1 ? recipe.order : null,
    stacks,
    frames: [...frames, ...copied],
    seams: seamsOf(frames, plan),
    holes: plan.holes,
  };
}

function stackOf(frames: readonly FrameTruth[], plan: ShootPlan, scene: Scene): StackTruth {
  const [first] = frames;
  if (!first || first.row === null || first.column === null || first.take === null) {
    throw new Error("expected a stack to have frames and a place");
  }
  return {
    row: first.row,
    column: first.column,
    take: first.take,
    files: frames.map(({ file }) => file),
    isBlank: landPart(first.pose, plan, scene) < LEAST_LAND_PART,
    isSoft: plan.recipe.softStacks > 0 && frames.every(({ softSigmaPx }) => softSigmaPx >= 1),
  };
}

function landPart(pose: Pose, plan: ShootPlan, scene: Scene): number {
  const { widthPx, heightPx } = plan.size;
  const top = pose.centreYPx - heightPx / 2;
  let land = 0;
  for (let x = 0; x < widthPx; x++) {
    const skyline = scene.skylinePx[Math.round(pose.centreXPx - widthPx / 2 + x)] ?? 0;
    land += Math.min(heightPx, Math.max(0, top + heightPx - skyline));
  }
  return land / (widthPx * heightPx);
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length / 2;
  return ((sorted[Math.ceil(middle) - 1] ?? 0) + (sorted[Math.floor(middle)] ?? 0)) / 2;
}

/** The pose in the middle of a first take's undeviating frames. */
function middlePose(frames: readonly FrameTruth[], row: number, column: number): Pose | null {
  const poses = frames
    .filter((frame) => frame.row === row && frame.column === column && frame.take === 1 && frame.deviation === null)
    .map(({ pose }) => pose);
  const [first] = poses;
  if (!first) return null;
  return {
    ...first,
    centreXPx: median(poses.map(({ centreXPx }) => centreXPx)),
    centreYPx: median(poses.map(({ centreYPx }) => centreYPx)),
    rollRad: median(poses.map(({ rollRad }) => rollRad)),
  };
}

function seamsOf(frames: readonly FrameTruth[], plan: ShootPlan): SeamTruth[] {
  const seams: SeamTruth[] = [];
  for (let row = 1; row <= plan.recipe.rows; row++) {
    for (let column = 1; column <= plan.recipe.columns; column++) {
      const here = middlePose(frames, row, column);
      const right = middlePose(frames, row, column + 1);
      const below = middlePose(frames, row + 1, column);
      if (here && right)
        seams.push({ row, column, side: "right", overlap: overlapBetween(here, right, plan.size, "right") });
      if (here && below)
        seams.push({ row, column, side: "below", overlap: overlapBetween(here, below, plan.size, "below") });
    }
  }
  return seams;
}
