// `npm run check`: lint and structure, types, formatting, unused code. All of them run; one failure fails the whole.
import { requireNode, root, runInstalled } from "./setup/project.mjs";

requireNode();
process.chdir(root);
const { ensureDependencies } = await import("./setup/dependencies.mjs");
const { findImportCycles } = await import("./setup/import-cycles.mjs");
await ensureDependencies();

/** @type {[name: string, script: string, args: string[]][]} */
const CHECKS = [
  ["lint and structure", "eslint/bin/eslint.js", [".", "--max-warnings=0"]],
  ["types", "typescript/bin/tsc", ["--noEmit"]],
  ["formatting", "prettier/bin/prettier.cjs", ["--check", "--log-level=warn", "."]],
  ["unused code", "knip/bin/knip.js", []],
];

/** @type {string[]} */
const failed = [];
for (const [name, script, args] of CHECKS) {
  const startMs = Date.now();
  const code = await runInstalled(script, args);
  console.log(`${code === 0 ? "ok    " : "FAILED"} ${name} (${((Date.now() - startMs) / 1000).toFixed(1)} s)`);
  if (code !== 0) failed.push(name);
}
const cycles = await findImportCycles();
for (const cycle of cycles) console.log(`circle of imports: ${cycle.join(" > ")}`);
console.log(`${cycles.length === 0 ? "ok    " : "FAILED"} circles of imports`);
if (cycles.length > 0) failed.push("circles of imports");
console.log(failed.length === 0 ? "check passed" : `check failed: ${failed.join(", ")}`);
process.exitCode = failed.length === 0 ? 0 : 1;
