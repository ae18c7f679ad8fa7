// `npm test`: everything a reviewer would run, from a checkout where nothing is installed.
import { mkdtemp, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { requireNode, root, runInstalled } from "./setup/project.mjs";

requireNode();
process.chdir(root);
const { ensureDependencies } = await import("./setup/dependencies.mjs");
const { ensureChromium } = await import("./setup/chromium.mjs");
const { ensureBuild } = await import("./setup/build.mjs");
const { addTotals, countPlaywright, countVitest } = await import("./setup/results.mjs");

const startMs = Date.now();
await ensureDependencies();
const chromium = await ensureChromium();
await ensureBuild();

const reports = await mkdtemp(path.join(tmpdir(), "stackyard-test-"));
const parts = [
  await runTests("Unit, integration and reference tests", {
    script: "vitest/vitest.mjs",
    args: ["run", "--reporter=default", "--reporter=json", `--outputFile.json=${path.join(reports, "vitest.json")}`],
    env: { NODE_ENV: "test" },
    report: path.join(reports, "vitest.json"),
    count: countVitest,
  }),
  await runTests("End-to-end tests", {
    script: "@playwright/test/cli.js",
    args: ["test", "--reporter=list,json"],
    env: { CHROMIUM_PATH: chromium, PLAYWRIGHT_JSON_OUTPUT_FILE: path.join(reports, "playwright.json") },
    report: path.join(reports, "playwright.json"),
    count: countPlaywright,
  }),
];
await rm(reports, { recursive: true, force: true });

const { passed, failed, skipped } = addTotals(parts);
console.log(`\nThe whole took ${Math.round((Date.now() - startMs) / 1000)} s.`);
for (const name of skipped) console.log(`skipped: ${name}`);
console.log(`${passed} passed, ${failed} failed, ${skipped.length} skipped`);
process.exitCode = failed > 0 || passed === 0 ? 1 : 0;

/**
 * @param {string} name
 * @param {{ script: string, args: string[], env: Record<string, string>, report: string,
 *   count: (report: any) => import("./setup/results.mjs").Totals }} runner
 * @returns {Promise<import("./setup/results.mjs").Totals>}
 */
async function runTests(name, { script, args, env, report, count }) {
  console.log(`\n${name}`);
  const code = await runInstalled(script, args, { env });
  const text = await readFile(report, "utf8").catch(() => null);
  const totals = text === null ? { passed: 0, failed: 0, skipped: [] } : count(JSON.parse(text));
  // A runner that fails without a failed test (an unhandled error, a crash) is a failure all the same.
  if (code !== 0 && totals.failed === 0) {
    console.log(`${name} ended with code ${code} without naming a failed test: counted as one failure.`);
    return { ...totals, failed: 1 };
  }
  return totals;
}
