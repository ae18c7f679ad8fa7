import { createHash } from "node:crypto";
import { readdir, readFile, rm, writeFile } from "node:fs/promises";
import path from "node:path";
import { fail, root, runInstalled } from "./project.mjs";

/** Everything the build reads. A change of anything else needs no build. */
const SOURCES = [
  "app",
  "components",
  "db",
  "lib",
  "public",
  "instrumentation.ts",
  "next.config.mjs",
  "package-lock.json",
  "postcss.config.mjs",
  "proxy.ts",
  "tailwind.config.ts",
  "tsconfig.json",
];
const STAMP = path.join(root, ".next", "SOURCES");

/** Builds the web application where there is no build of these very sources. Ends the process where it fails. */
export async function ensureBuild() {
  const before = await hashSources();
  if (before === (await readFile(STAMP, "utf8").catch(() => null))) return;
  console.log("Building the web application. This takes about two minutes.");
  await rm(STAMP, { force: true });
  const code = await runInstalled("next/dist/bin/next", ["build"], { env: { NODE_ENV: "production" } });
  if (code !== 0) fail("The build failed (its message is above).");
  await writeFile(STAMP, before);
}

async function hashSources() {
  const hash = createHash("sha256");
  for (const source of SOURCES) await addToHash(hash, source);
  return hash.digest("hex");
}

/**
 * @param {import("node:crypto").Hash} hash
 * @param {string} name path from the project's folder
 */
async function addToHash(hash, name) {
  if (/\.test\.tsx?$/.test(name)) return;
  const entries = await readdir(path.join(root, name), { withFileTypes: true }).catch(() => null);
  if (!entries) {
    const bytes = await readFile(path.join(root, name)).catch(() => null);
    if (bytes) hash.update(`${name}\0${bytes.length}\0`).update(bytes);
    return;
  }
  for (const entry of entries.sort((a, b) => (a.name < b.name ? -1 : 1))) {
    await addToHash(hash, `${name}/${entry.name}`);
  }
}
