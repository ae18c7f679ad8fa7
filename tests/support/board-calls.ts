// Before anything that reads cookies.
import "./people";
import { expect } from "vitest";
import { GET as getBoardRoute } from "@/app/api/projects/[projectId]/board/route";
import { POST as postCommand } from "@/app/api/projects/[projectId]/commands/route";
import { GET as getMineRoute } from "@/app/api/projects/[projectId]/record/mine/route";
import { GET as getRecordRoute } from "@/app/api/projects/[projectId]/record/route";
import { boardSinceSchema, commandAnswerSchema, recordSchema, undoStateSchema } from "@/lib/board/command-answers";
import type { CommandDraft } from "@/lib/board/command-schema";
import type { Board } from "@/lib/board/model";
import { boardSchema } from "@/lib/board/schema";

export type SentCommand = CommandDraft & { readonly id?: string };

/** The board's calls as whoever is signed in makes them, through the route handlers. */
export function callsOn(projectId: string) {
  const context = { params: Promise.resolve({ projectId }) };
  const address = (rest: string) => `http://localhost:3000/api/projects/${projectId}/${rest}`;
  const get = async (handler: typeof getBoardRoute, rest: string): Promise<unknown> => {
    const response = await handler(new Request(address(rest)), context);
    expect(response.status, await response.clone().text()).toBe(200);
    return response.json();
  };
  const send = (command: SentCommand): Promise<Response> =>
    postCommand(
      new Request(address("commands"), {
        method: "POST",
        headers: { "content-type": "application/json" },
        body: JSON.stringify({ id: crypto.randomUUID(), revision: 0, ...command }),
      }),
      context,
    );
  return {
    send,
    done: async (command: SentCommand) => {
      const response = await send(command);
      expect(response.status, await response.clone().text()).toBe(200);
      return commandAnswerSchema.parse(await response.json());
    },
    refused: async (command: SentCommand, status = 409) => {
      const response = await send(command);
      const body = (await response.json()) as { readonly detail: string; readonly code: string };
      expect(response.status, JSON.stringify(body)).toBe(status);
      return body;
    },
    board: async (): Promise<Board> => boardSchema.parse(await get(getBoardRoute, "board?texts=tokens")),
    since: async (revision: number) => boardSinceSchema.parse(await get(getBoardRoute, `board?since=${revision}`)),
    record: async (query = "") => recordSchema.parse(await get(getRecordRoute, `record${query}`)),
    mine: async () => undoStateSchema.parse(await get(getMineRoute, "record/mine")),
  };
}
