import { accessSync, constants } from "node:fs";
import { fail, run } from "./project.mjs";

/** Where Debian puts it. */
const DEBIAN_CHROMIUM = "/usr/bin/chromium";

/**
 * The browser of the end-to-end tests: CHROMIUM_PATH, or Debian's, installed where that is allowed.
 * Ends the process where there is none: tests without a browser are no tests of the product.
 * @returns {Promise<string>} its path
 */
export async function ensureChromium() {
  const given = process.env.CHROMIUM_PATH;
  if (given) return isProgram(given) ? given : fail(`CHROMIUM_PATH is ${given}, which is not a program.`);
  if (isProgram(DEBIAN_CHROMIUM)) return DEBIAN_CHROMIUM;
  if (process.getuid?.() === 0) await installChromium();
  if (isProgram(DEBIAN_CHROMIUM)) return DEBIAN_CHROMIUM;
  return fail(
    "The end-to-end tests need Chromium. Install it (apt-get install chromium), or say where it is with CHROMIUM_PATH.",
  );
}

async function installChromium() {
  console.log("Installing Debian's Chromium for the end-to-end tests.");
  // Another installation may hold the lock: wait for it, up to five minutes.
  const wait = ["-o", "DPkg::Lock::Timeout=300", "-qq"];
  const env = { DEBIAN_FRONTEND: "noninteractive" };
  await run("apt-get", [...wait, "update"], { env });
  await run("apt-get", [...wait, "install", "-y", "--no-install-recommends", "chromium"], { env, quiet: true });
}

/** @param {string} file */
function isProgram(file) {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}
