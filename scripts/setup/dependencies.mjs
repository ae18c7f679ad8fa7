import { readFile } from "node:fs/promises";
import path from "node:path";
import { fail, root, run } from "./project.mjs";

/** Runs `npm ci` where node_modules is not what the lock file says. Ends the process where that fails. */
export async function ensureDependencies() {
  if (await isInstalled()) return;
  console.log("Installing dependencies (npm ci). This takes about two minutes.");
  // The build's own tools are development dependencies: they are needed whatever NODE_ENV says.
  const code = await run("npm", ["ci", "--include=dev", "--no-fund", "--no-audit", "--loglevel=error"]);
  if (code !== 0) fail("npm ci failed (its message is above). Is the npm registry within reach? Then run this again.");
}

/** npm leaves a list of what it installed, written last: an interrupted installation has none. */
async function isInstalled() {
  const [wanted, present] = await Promise.all([
    readPackages("package-lock.json"),
    readPackages("node_modules/.package-lock.json"),
  ]);
  if (!wanted) fail("package-lock.json is missing: this is not a whole copy of the project.");
  if (!present) return false;
  return Object.entries(wanted).every(([name, entry]) => {
    if (name === "") return true;
    const found = present[name];
    // Optional packages are for one kind of machine each: those of the others are absent.
    if (!found) return entry.optional === true || entry.devOptional === true;
    return found.version === entry.version && found.integrity === entry.integrity;
  });
}

/**
 * @param {string} file
 * @returns {Promise<Record<string, { version?: string, integrity?: string, optional?: boolean, devOptional?: boolean }> | null>}
 */
async function readPackages(file) {
  try {
    return JSON.parse(await readFile(path.join(root, file), "utf8")).packages;
  } catch {
    return null;
  }
}
