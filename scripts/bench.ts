// npm run bench [-- --kinds clean,soft --seeds 301,302 --jobs 2 --no-speed --no-accuracy --commands]
import { availableParallelism } from "node:os";
import { parseArgs } from "node:util";

import { SHOOT_KINDS } from "@/tests/support/shoots/kinds";
import {
  describeReliability,
  describeResult,
  RESULT_HEAD,
  runShoot,
  summarise,
  type ShootResult,
} from "./bench/accuracy";
import { measureSpeed } from "./bench/speed";

/** Seeds that nothing was tuned on: the sorting was tuned on 1 to 299. */
const REPORTED_SEEDS = "301";

const { values } = parseArgs({
  options: {
    kinds: { type: "string", default: SHOOT_KINDS.join(",") },
    seeds: { type: "string", default: REPORTED_SEEDS },
    jobs: { type: "string", default: String(availableParallelism()) },
    "no-speed": { type: "boolean", default: false },
    "no-accuracy": { type: "boolean", default: false },
    /** Round trips of commands on the production build, and nothing else. */
    commands: { type: "boolean", default: false },
  },
});
const jobs = Number(values.jobs);

if (values.commands) {
  const { measureCommands } = await import("./bench/commands");
  writeTable(["commands over HTTP", "round trip"], await measureCommands());
}
if (!values.commands && !values["no-speed"]) writeTable(["speed", "figure"], await measureSpeed(jobs));
if (!values.commands && !values["no-accuracy"]) {
  process.stdout.write(`\n| ${RESULT_HEAD.join(" | ")} |\n|${" --- |".repeat(RESULT_HEAD.length)}\n`);
  const results: ShootResult[] = [];
  for (const kind of values.kinds.split(",")) {
    for (const seed of values.seeds.split(",").map(Number)) {
      const result = await runShoot(kind, seed, jobs);
      results.push(result);
      process.stdout.write(`| ${describeResult(result).join(" | ")} |\n`);
      for (const fault of result.faults.slice(0, 3)) process.stderr.write(`  ${kind} ${seed}: ${fault}\n`);
    }
  }
  writeTable(["over all", "figure"], summarise(results));
  writeTable(["sure by", "right"], describeReliability(results));
}

function writeTable(head: readonly string[], rows: readonly (readonly string[])[]): void {
  const lines = [head, head.map(() => "---"), ...rows].map((cells) => `| ${cells.join(" | ")} |`);
  process.stdout.write(`\n${lines.join("\n")}\n`);
}
