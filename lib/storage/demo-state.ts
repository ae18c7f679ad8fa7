import "server-only";
import { mkdir, readFile, writeFile } from "node:fs/promises";
import path from "node:path";
import { z } from "zod";
import { environment } from "@/lib/env";

/** made: all its frames are in. removed: somebody took it away. Either way it is not made again. */
const stateSchema = z.enum(["made", "removed"]);
export type DemoState = z.infer<typeof stateSchema>;

function stateFile(): string {
  return path.join(environment().storageDir, "demo-state");
}

/** Null: never finished. */
export async function readDemoState(): Promise<DemoState | null> {
  const text = await readFile(stateFile(), "utf8").catch(() => "");
  return stateSchema.safeParse(text.trim()).data ?? null;
}

export async function writeDemoState(state: DemoState): Promise<void> {
  await mkdir(environment().storageDir, { recursive: true });
  await writeFile(stateFile(), `${state}\n`);
}
