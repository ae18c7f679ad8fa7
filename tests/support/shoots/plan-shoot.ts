import type { FrameSize, Pose } from "@/scripts/demo/pose";
import { makeRandom, mixSeeds, type SeededRandom, seedFromText } from "@/scripts/demo/seeded-random";
import { changesOf } from "./kinds";
import { PLAIN_RECIPE, type Recipe } from "./recipe";
import { SHOOT_SCENES } from "./shoot-truth";
import { type Place, walk } from "./walk";

/** One press of the release, before it has a name and a clock. */
export interface PlannedShot {
  readonly place: Place | null;
  readonly take: number;
  readonly stray: "ground" | "black" | "marker" | null;
  readonly pose: Pose;
  readonly body: number;
  readonly trueMs: number;
  softSigmaPx: number;
  motion: { lengthPx: number; angleRad: number } | null;
  deviation: "exposure" | "focal-length" | "framing" | null;
  /** Stops by the camera's exposure time. */
  exposureEv: number;
  /** Stops by the light of the scene. */
  lightEv: number;
  readonly index: number;
}

export interface ShootPlan {
  readonly recipe: Recipe;
  readonly size: FrameSize;
  readonly sceneSize: FrameSize;
  readonly shots: readonly PlannedShot[];
  readonly holes: readonly Place[];
}

const between = (random: SeededRandom, range: readonly [number, number]) => random.between(range[0], range[1]);

export function recipeOf(kind: string, seed: number): Recipe {
  const random = makeRandom(mixSeeds(seed, seedFromText(kind), 1));
  const scene = SHOOT_SCENES[seed % SHOOT_SCENES.length] ?? "landscape";
  return { ...PLAIN_RECIPE, scene, ...changesOf(kind, random) };
}

/** Decides all that a shoot is, without drawing anything: same arguments, same plan. */
export function planShoot(kind: string, seed: number, storedSize: FrameSize): ShootPlan {
  const recipe = recipeOf(kind, seed);
  const stored = recipe.size ?? storedSize;
  const size = recipe.portrait ? { widthPx: stored.heightPx, heightPx: stored.widthPx } : stored;
  const random = makeRandom(mixSeeds(seed, seedFromText(kind), 2));
  const layout = layGrid(recipe, size, random);
  const holes = chooseHoles(recipe, random);
  const shots =
    recipe.bodies === 2 ? shootWithTwo(recipe, layout, holes, random) : shootAll(recipe, layout, holes, random);
  shots.sort((a, b) => a.trueMs - b.trueMs || a.index - b.index);
  spoilFrames(recipe, shots, size.widthPx, random);
  return { recipe, size, sceneSize: layout.sceneSize, shots, holes };
}

interface Layout {
  readonly size: FrameSize;
  readonly sceneSize: FrameSize;
  poseAt(place: Place): Pose;
}

function layGrid(recipe: Recipe, size: FrameSize, random: SeededRandom): Layout {
  const stepX = size.widthPx * (1 - between(random, recipe.overlapAcross));
  const stepY = size.heightPx * (1 - between(random, recipe.overlapDown));
  const margin = recipe.sphereFocalWidths ? 0.35 : 0.08;
  const marginX = size.widthPx * margin;
  const marginY = size.heightPx * margin;
  const sceneSize = {
    widthPx: Math.ceil(size.widthPx + stepX * (recipe.columns - 1) + 2 * marginX),
    heightPx: Math.ceil(size.heightPx + stepY * (recipe.rows - 1) + 2 * marginY),
  };
  const thin = new Map<string, number>();
  for (let i = 0; i < recipe.thinSeams && recipe.columns > 2; i++) {
    thin.set(`${random.whole(1, recipe.rows)}/${random.whole(2, recipe.columns - 1)}`, 0.12 * size.widthPx);
  }
  const sphere = recipe.sphereFocalWidths && {
    focalPx: recipe.sphereFocalWidths * size.widthPx,
    originXPx: sceneSize.widthPx / 2,
    originYPx: sceneSize.heightPx / 2,
  };
  return {
    size,
    sceneSize,
    poseAt: (place) => ({
      centreXPx:
        marginX + size.widthPx / 2 + stepX * (place.column - 1) + (thin.get(`${place.row}/${place.column}`) ?? 0),
      centreYPx: marginY + size.heightPx / 2 + stepY * (place.row - 1),
      rollRad: 0,
      zoom: 1,
      distortion: recipe.distortion,
      sphere: sphere || null,
    }),
  };
}

/** Never so many that a row or column loses all its tiles. */
function chooseHoles(recipe: Recipe, random: SeededRandom): Place[] {
  const holes: Place[] = [];
  while (holes.length < recipe.missingTiles) {
    const place = { row: random.whole(1, recipe.rows), column: random.whole(1, recipe.columns) };
    const isFree = holes.every((hole) => hole.row !== place.row && hole.column !== place.column);
    if (isFree) holes.push(place);
    else if (holes.length >= Math.min(recipe.rows, recipe.columns) - 1) break;
  }
  return holes;
}

/** Follows one photographer through the shoot: the time runs, shots are added. */
class Walker {
  readonly shots: PlannedShot[] = [];
  constructor(
    private readonly recipe: Recipe,
    private readonly layout: Layout,
    private readonly random: SeededRandom,
    private readonly body: number,
    private nowMs: number,
  ) {}

  private waitSeconds(seconds: number): void {
    this.nowMs += Math.round(seconds * 1000);
  }

  private add(shot: Pick<PlannedShot, "place" | "take" | "stray" | "pose">): void {
    this.shots.push({
      ...shot,
      body: this.body,
      trueMs: this.nowMs,
      softSigmaPx: 0,
      motion: null,
      deviation: null,
      exposureEv: 0,
      lightEv: 0,
      index: this.shots.length,
    });
  }

  private moved(pose: Pose, jitter: number): Pose {
    const { widthPx } = this.layout.size;
    const rollDeg = Math.max(-1, Math.min(1, this.random.normal() / 2)) * this.recipe.mostRollDeg;
    return {
      ...pose,
      centreXPx: pose.centreXPx + this.random.normal() * jitter * widthPx,
      centreYPx: pose.centreYPx + this.random.normal() * jitter * widthPx,
      rollRad: (rollDeg * Math.PI) / 180,
    };
  }

  move(): void {
    this.waitSeconds(between(this.random, this.recipe.moveGapSeconds));
  }

  breakFor(seconds: number): void {
    this.waitSeconds(seconds);
  }

  /** Frames of one tile; the clock stands at the last of them afterwards. */
  takeTile(place: Place, take: number): void {
    const { recipe, random } = this;
    const aim = this.moved(this.layout.poseAt(place), recipe.aimJitter);
    const count = random.whole(recipe.framesPerTile[0], recipe.framesPerTile[1]);
    for (let i = 0; i < count; i++) {
      if (i > 0) this.waitSeconds(between(random, recipe.frameGapSeconds));
      if (i > 0 && random.chance(recipe.pauseChance)) this.waitSeconds(between(random, recipe.pauseSeconds));
      this.add({ place, take, stray: null, pose: this.moved(aim, recipe.frameJitter) });
    }
  }

  takeStray(stray: "ground" | "black" | "marker"): void {
    const pose = this.layout.poseAt({ row: 1, column: 1 });
    this.add({ place: null, take: 1, stray, pose: { ...pose, distortion: 0, sphere: null } });
  }
}

function chooseTiles(places: readonly Place[], count: number, random: SeededRandom): Place[] {
  const left = [...places];
  const chosen: Place[] = [];
  while (chosen.length < count && left.length > 0) {
    chosen.push(...left.splice(Math.floor(random.next() * left.length), 1));
  }
  return chosen;
}

function shootAll(recipe: Recipe, layout: Layout, holes: readonly Place[], random: SeededRandom): PlannedShot[] {
  const isHole = (place: Place) => holes.some((hole) => hole.row === place.row && hole.column === place.column);
  const places = walk(recipe.rows, recipe.columns, recipe.order).filter((place) => !isHole(place));
  const doubled = new Set(chooseTiles(places, recipe.doubledTiles, random));
  const strayBefore = new Set(chooseTiles(places, recipe.strays, random));
  const walker = new Walker(recipe, layout, random, 0, 0);
  const lineOf = (place: Place) => (recipe.order.along === "rows" ? place.row : place.column);
  places.forEach((place, i) => {
    const before = places[i - 1];
    if (recipe.hasMarkers && (!before || lineOf(before) !== lineOf(place))) {
      walker.takeStray("marker");
      walker.move();
    }
    if (strayBefore.has(place)) {
      walker.takeStray(random.chance(0.75) ? "ground" : "black");
      walker.move();
    }
    walker.takeTile(place, 1);
    walker.move();
    if (doubled.has(place)) {
      // In doubt whether it was taken, the photographer takes it again at once: one stack, with a pause in it.
      walker.takeTile(place, 1);
      walker.move();
    }
  });
  if (recipe.hasMarkers) walker.takeStray("marker");
  for (const place of chooseTiles(places, recipe.reshotTiles, random)) {
    walker.breakFor(random.between(30, 120));
    walker.takeTile(place, 2);
  }
  return walker.shots;
}

/** Each body takes every other row, both at once. */
function shootWithTwo(recipe: Recipe, layout: Layout, holes: readonly Place[], random: SeededRandom): PlannedShot[] {
  const isHole = (place: Place) => holes.some((hole) => hole.row === place.row && hole.column === place.column);
  const places = walk(recipe.rows, recipe.columns, recipe.order).filter((place) => !isHole(place));
  return [0, 1].flatMap((body) => {
    const walker = new Walker(recipe, layout, random, body, body * 2_300);
    for (const place of places.filter(({ row }) => row % 2 !== body)) {
      walker.takeTile(place, 1);
      walker.move();
    }
    return walker.shots;
  });
}

const SOFT_SIGMAS_PX = [0.5, 0.7, 0.7, 1, 1.5, 2, 3, 4];

/** Exposure, focus, framing and light of single frames go wrong here; at most one fault a frame. */
function spoilFrames(recipe: Recipe, shots: PlannedShot[], widthPx: number, random: SeededRandom): void {
  const lastMs = shots[shots.length - 1]?.trueMs ?? 0;
  const driftPhase = random.between(0, 6);
  const indexInStack = new Map<string, number>();
  for (const shot of shots) {
    const part = shot.trueMs / Math.max(1, lastMs);
    shot.lightEv = recipe.lightDriftEv * 0.5 * (Math.sin(driftPhase + part * 5) - Math.sin(driftPhase));
    if (!recipe.isBracketed || !shot.place) continue;
    const key = `${shot.place.row}/${shot.place.column}/${shot.take}`;
    const index = indexInStack.get(key) ?? 0;
    indexInStack.set(key, index + 1);
    shot.exposureEv = [0, -5 / 3, 5 / 3][index % 3] ?? 0;
  }
  const free = shots.filter((shot) => shot.place !== null);
  const stacksChosen = chooseTiles(
    free.flatMap(({ place }) => (place ? [place] : [])),
    recipe.softStacks,
    random,
  );
  for (const place of stacksChosen) {
    const sigma = random.between(1, 3);
    for (const shot of free) {
      if (shot.place?.row === place.row && shot.place.column === place.column) shot.softSigmaPx = sigma;
    }
  }
  const takeFree = (count: number) =>
    Array.from({ length: Math.min(count, free.length) }, () =>
      free.splice(Math.floor(random.next() * free.length), 1),
    ).flat();
  for (const shot of takeFree(recipe.softFrames)) shot.softSigmaPx = random.pick(SOFT_SIGMAS_PX);
  for (const shot of takeFree(recipe.motionFrames)) {
    const lengthPx = random.between(3, 12);
    shot.motion = { lengthPx, angleRad: random.between(0, Math.PI) };
    shot.softSigmaPx = lengthPx / Math.sqrt(12);
  }
  for (const shot of takeFree(recipe.exposureDeviations)) {
    shot.deviation = "exposure";
    shot.exposureEv = random.pick([-1, -2 / 3, 1 / 3, 2 / 3, 1]);
  }
  deviatePoses(shots, takeFree(recipe.focalDeviations), (pose) => ({ ...pose, zoom: random.pick([0.95, 1.04, 1.06]) }));
  deviatePoses(shots, takeFree(recipe.framingDeviations), (pose) => {
    const away = random.between(0.012, 0.03) * widthPx * (random.chance(0.5) ? 1 : -1);
    return { ...pose, centreXPx: pose.centreXPx + away, centreYPx: pose.centreYPx + away * random.between(-0.6, 0.6) };
  });
}

function deviatePoses(shots: PlannedShot[], chosen: readonly PlannedShot[], change: (pose: Pose) => Pose): void {
  for (const shot of chosen) {
    const pose = change(shot.pose);
    const deviation = pose.zoom === 1 ? "framing" : "focal-length";
    shots.splice(shots.indexOf(shot), 1, { ...shot, pose, deviation });
  }
}
