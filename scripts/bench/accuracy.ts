import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";

import { scoreShoot, type ShootScore } from "@/tests/support/accuracy/score-shoot";
import { generateShoot } from "@/tests/support/shoots/generate-shoot";
import { analyseFiles } from "../sort/analyse-files";
import { collectFiles } from "../sort/collect-files";
import { parseCommand } from "../sort/options";
import { sortAnalysed } from "../sort/sort-analysed";

export interface ShootResult extends ShootScore {
  readonly kind: string;
  readonly seed: number;
  readonly frames: number;
  readonly sortSeconds: number;
}

/** Makes a shoot, sorts it as `npm run sort` does, and holds the result against what is known of it. */
export async function runShoot(kind: string, seed: number, jobs: number): Promise<ShootResult> {
  const folder = await mkdtemp(path.join(tmpdir(), "stackyard-bench-"));
  try {
    const shoot = path.join(folder, "shoot");
    const truth = await generateShoot(kind, seed, shoot);
    const { pictures } = await collectFiles(shoot);
    const { frames } = await analyseFiles(pictures, { jobs, registrationFolder: folder, onRead: () => {} });
    const command = parseCommand([shoot], folder);
    if (command === null) throw new Error("a folder alone is a command");
    const started = performance.now();
    const proposal = await sortAnalysed(frames, command.options);
    const sortSeconds = (performance.now() - started) / 1000;
    const named = frames.map(({ id, files }) => ({ id, folder: files[0]?.folder ?? null, files }));
    return { kind, seed, frames: frames.length, sortSeconds, ...scoreShoot(truth, named, proposal) };
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** One line of the accuracy table; shares in per cent, `-` where a kind has none. */
export function describeResult(result: ShootResult): string[] {
  const { soft, overlapErrors } = result;
  return [
    `${result.kind} ${result.seed}`,
    String(result.frames),
    result.areStacksExact ? "yes" : "NO",
    result.f1.toFixed(4),
    result.ari.toFixed(4),
    `${result.placesExact}/${result.stacks}`,
    percent(quantile(overlapErrors, 0.95)),
    `${result.straysHandled}/${result.strays}`,
    `${soft["0.7"].aside}/${soft["0.7"].all}`,
    `${soft["0.5"].aside}/${soft["0.5"].all}`,
    String(result.falselySoft),
    String(result.questions),
    `${result.wrongAsked}/${result.wrong}`,
    result.sortSeconds.toFixed(1),
  ];
}

export const RESULT_HEAD = [
  "shoot",
  "frames",
  "stacks exact",
  "F1",
  "ARI",
  "places",
  "overlap error p95 %",
  "strays",
  "soft 0.7+",
  "soft 0.5",
  "falsely soft",
  "questions",
  "wrong asked",
  "sort s",
];

/** The figures that analysis.md sets targets for, over all shoots. */
export function summarise(results: readonly ShootResult[]): string[][] {
  const sum = (of: (result: ShootResult) => number) => results.reduce((total, result) => total + of(result), 0);
  const aside = sum(({ soft }) => soft["0.7"].aside + soft["0.5"].aside);
  const errors = results.flatMap(({ overlapErrors }) => overlapErrors);
  return [
    ["shoots with all stacks exact", ratio(results.filter((each) => each.areStacksExact).length, results.length)],
    [
      "stacks whole at their row and column",
      ratio(
        sum((each) => each.placesExact),
        sum((each) => each.stacks),
      ),
    ],
    [
      "overlap error, median / 95th percentile, %",
      `${percent(quantile(errors, 0.5))} / ${percent(quantile(errors, 0.95))}`,
    ],
    [
      "overlaps measured",
      ratio(
        errors.length,
        sum((each) => each.seams),
      ),
    ],
    [
      "strays kept out or asked about",
      ratio(
        sum((each) => each.straysHandled),
        sum((each) => each.strays),
      ),
    ],
    [
      "soft of 0.7 px and more set aside",
      ratio(
        sum(({ soft }) => soft["0.7"].aside),
        sum(({ soft }) => soft["0.7"].all),
      ),
    ],
    [
      "soft of 0.5 px set aside or asked about",
      ratio(
        sum(({ soft }) => soft["0.5"].found),
        sum(({ soft }) => soft["0.5"].all),
      ),
    ],
    ["set aside as soft and really soft", ratio(aside, aside + sum((each) => each.falselySoft))],
    [
      "deviating frames found",
      ratio(
        sum((each) => each.deviatingFound),
        sum((each) => each.deviating),
      ),
    ],
    [
      "wrong frames that a question names",
      ratio(
        sum((each) => each.wrongAsked),
        sum((each) => each.wrong),
      ),
    ],
  ];
}

/** How often frames are right of which the computation is this sure. */
export function describeReliability(results: readonly ShootResult[]): string[][] {
  const all = results.flatMap(({ reliability }) => reliability);
  return [0, 0.5, 0.7, 0.8, 0.9, 0.95, 0.99].map((least, at, bounds) => {
    const most = bounds[at + 1] ?? Infinity;
    const here = all.filter(({ confidence }) => confidence >= least && confidence < most);
    return [
      `${least} to ${most === Infinity ? 1 : most}`,
      ratio(here.filter(({ isRight }) => isRight).length, here.length),
    ];
  });
}

function ratio(part: number, whole: number): string {
  return whole === 0 ? "-" : `${part}/${whole} = ${((100 * part) / whole).toFixed(1)} %`;
}

function percent(fraction: number | null): string {
  return fraction === null ? "-" : (100 * fraction).toFixed(2);
}

function quantile(values: readonly number[], share: number): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? null;
}
