import { z } from "zod";
import { conflictSchema } from "@/lib/board/command-answers";
import { boardCommandSchema } from "@/lib/board/command-schema";

/** Why the server did not do a command. */
const refusedSchema = z.object({
  /** The server's words. */
  detail: z.string(),
  /** Where something else is there now than the person saw. */
  conflict: conflictSchema.nullable(),
  /** The server failed or did not take it in: the same may be tried again. */
  isRepeatable: z.boolean(),
});

/** A command with the words that explain it later, when the board has moved on. */
const givenCommandSchema = z.object({
  command: boardCommandSchema,
  /** "Moved HARB0019 from A3 to A4". */
  sentence: z.string(),
  /** What the person saw of what the command is about: "HARB0019 was in A3", by id of frame or stack. */
  seen: z.record(z.string(), z.string()),
  givenAtMs: z.number(),
});
export type GivenCommand = z.infer<typeof givenCommandSchema>;

/** A refused one is kept until its person has read why; it is never sent again by itself. */
const keptCommandSchema = givenCommandSchema.extend({ refused: refusedSchema.optional() });
export type KeptCommand = z.infer<typeof keptCommandSchema>;

/** Where commands outlive the page: one entry each, so that two pages of one browser do not overwrite each other. */
export class KeptCommands {
  constructor(
    private readonly storage: Pick<Storage, "getItem" | "setItem" | "removeItem" | "key" | "length"> | null,
    /** Whose and of which project. */
    userId: string,
    projectId: string,
  ) {
    this.prefix = `stackyard-waiting/${userId}/${projectId}/`;
  }

  private readonly prefix: string;

  /** @returns false where the browser keeps nothing (full, or forbidden): then only this page knows the command */
  keep(given: KeptCommand): boolean {
    try {
      this.storage?.setItem(this.prefix + given.command.id, JSON.stringify(given));
      return this.storage !== null;
    } catch {
      return false;
    }
  }

  forget(id: string): void {
    try {
      this.storage?.removeItem(this.prefix + id);
    } catch {
      // Forbidden storage holds nothing to forget.
    }
  }

  /** In the order given. What cannot be read is left where it is: a newer version of the program may have written it. */
  list(): KeptCommand[] {
    try {
      const keys = Array.from({ length: this.storage?.length ?? 0 }, (_, at) => this.storage?.key(at) ?? "");
      return keys
        .filter((key) => key.startsWith(this.prefix))
        .flatMap((key) => parse(this.storage?.getItem(key) ?? ""))
        .sort((a, b) => a.givenAtMs - b.givenAtMs);
    } catch {
      return [];
    }
  }
}

function parse(text: string): KeptCommand[] {
  try {
    const given = keptCommandSchema.safeParse(JSON.parse(text));
    return given.success ? [given.data] : [];
  } catch {
    return [];
  }
}
