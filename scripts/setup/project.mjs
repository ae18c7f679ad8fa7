// Plain Node.js: runs before anything is installed.
import { spawn } from "node:child_process";
import path from "node:path";
import { fileURLToPath } from "node:url";

/** The project's folder, absolute. */
export const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), "../..");

/** The oldest Node.js that the dependencies run on (`engines` in package.json). */
const OLDEST_NODE = { major: 20, minor: 11 };

/** Ends the process with one clear line where Node.js is too old. */
export function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  if (major > OLDEST_NODE.major || (major === OLDEST_NODE.major && minor >= OLDEST_NODE.minor)) return;
  const oldest = `${OLDEST_NODE.major}.${OLDEST_NODE.minor}`;
  fail(`Stackyard needs Node.js ${oldest} or newer; this is ${process.versions.node}.`);
}

/**
 * Prints one line on standard error and ends the process with 1.
 * @param {string} sentence
 * @returns {never}
 */
export function fail(sentence) {
  console.error(sentence);
  process.exit(1);
}

/**
 * Runs a program in the project's folder, its output passed through.
 * @param {string} program
 * @param {string[]} args
 * @param {{ env?: Record<string, string>, quiet?: boolean }} [options] quiet: standard output is dropped
 * @returns {Promise<number>} its exit code; 1 where a signal ended it, 127 where it is not there
 */
export function run(program, args, { env = {}, quiet = false } = {}) {
  return new Promise((resolve) => {
    const child = spawn(program, args, {
      cwd: root,
      env: { ...process.env, NEXT_TELEMETRY_DISABLED: "1", ...env },
      stdio: ["ignore", quiet ? "ignore" : "inherit", "inherit"],
    });
    // Ctrl-C and SIGTERM reach the program too; this process ends when it has.
    const pass = (/** @type {NodeJS.Signals} */ signal) => child.kill(signal);
    process.on("SIGINT", pass);
    process.on("SIGTERM", pass);
    const finish = (/** @type {number} */ code) => {
      process.off("SIGINT", pass);
      process.off("SIGTERM", pass);
      resolve(code);
    };
    child.on("error", () => finish(127));
    child.on("exit", (code, signal) => {
      if (signal === "SIGINT" || signal === "SIGTERM") process.exit(1);
      finish(code ?? 1);
    });
  });
}

/**
 * Runs a script of an installed package by Node.js itself, without npx between (a wrapper swallows signals).
 * @param {string} script path under node_modules
 * @param {string[]} args
 * @param {{ env?: Record<string, string> }} [options]
 * @returns {Promise<number>} its exit code
 */
export function runInstalled(script, args, options) {
  return run(process.execPath, [path.join(root, "node_modules", script), ...args], options);
}
