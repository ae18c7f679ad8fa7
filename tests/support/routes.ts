import { readdirSync } from "node:fs";
import path from "node:path";

const ROOT = path.resolve(import.meta.dirname, "../..");

/** Every file of that name under `app/`, relative to it, in order: what the product answers with. */
export function listAppFiles(name: "route.ts" | "page.tsx"): string[] {
  return readdirSync(path.join(ROOT, "app"), { recursive: true, encoding: "utf8" })
    .filter((file) => path.basename(file) === name)
    .map((file) => file.replaceAll(path.sep, "/"))
    .sort();
}
