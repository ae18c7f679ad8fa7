// Finds files that import each other in a circle. `import type` does not count: nothing of it is left when the code runs.
import { existsSync } from "node:fs";
import { readdir, readFile } from "node:fs/promises";
import path from "node:path";
import { root } from "./project.mjs";

const FOLDERS = ["app", "components", "db", "lib", "scripts"];
const IMPORT = /^(?:import|export)\s(?!type\b)[^;]*?from\s+"((?:@\/|\.)[^"]+)"|^import\s+"((?:@\/|\.)[^"]+)"/gm;

/** @returns {Promise<string[][]>} each circle once, as relative paths */
export async function findImportCycles() {
  const files = await listSources();
  /** @type {Map<string, string[]>} */
  const imports = new Map();
  for (const file of files) imports.set(file, await readImports(file));
  return findCycles(imports);
}

/**
 * Circles of a directed graph, each once.
 * @param {ReadonlyMap<string, readonly string[]>} edges
 * @returns {string[][]}
 */
export function findCycles(edges) {
  /** @type {string[][]} */
  const cycles = [];
  /** @type {Set<string>} */
  const finished = new Set();
  /** @type {string[]} */
  const way = [];
  /** @param {string} node */
  function visit(node) {
    const at = way.indexOf(node);
    if (at >= 0) cycles.push([...way.slice(at), node]);
    if (at >= 0 || finished.has(node)) return;
    way.push(node);
    for (const next of edges.get(node) ?? []) visit(next);
    way.pop();
    finished.add(node);
  }
  for (const node of edges.keys()) visit(node);
  return cycles;
}

async function listSources() {
  const lists = await Promise.all(
    FOLDERS.map(async (folder) => {
      const entries = await readdir(path.join(root, folder), { recursive: true, withFileTypes: true });
      return entries.map((entry) => path.relative(root, path.join(entry.parentPath, entry.name)));
    }),
  );
  return lists.flat().filter((file) => /\.(tsx?|mjs)$/.test(file) && !/\.test\.tsx?$/.test(file));
}

/** @param {string} file */
async function readImports(file) {
  const text = await readFile(path.join(root, file), "utf8");
  return [...text.matchAll(IMPORT)].flatMap(([, from, bare]) => resolve(file, from ?? bare ?? ""));
}

/**
 * @param {string} file
 * @param {string} specifier
 */
function resolve(file, specifier) {
  const base = specifier.startsWith("@/") ? specifier.slice(2) : path.join(path.dirname(file), specifier);
  return [base, `${base}.ts`, `${base}.tsx`].filter((name) => /\.\w+$/.test(name) && existsSync(path.join(root, name)));
}
