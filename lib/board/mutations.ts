import { z } from "zod";
import { commandAnswerSchema, type CommandAnswer } from "@/lib/board/command-answers";
import type { BoardCommand } from "@/lib/board/command-schema";
import { fetchJson } from "@/lib/http/fetch-json";

/** A server that has not answered by then is taken for one that will not, ms: the command is sent again. */
const ANSWER_WITHIN_MS = 20_000;

function post(body: unknown): RequestInit {
  return {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify(body),
    signal: AbortSignal.timeout(ANSWER_WITHIN_MS),
  };
}

/** Sends one command. The same id again is applied once and answered the same. @throws FetchProblem */
export function sendCommand(projectId: string, command: BoardCommand): Promise<CommandAnswer> {
  return fetchJson(`/api/projects/${projectId}/commands`, commandAnswerSchema, post(command));
}

/** Asks the worker to sort anew what nobody decided. @throws FetchProblem */
export function askToSort(projectId: string): Promise<unknown> {
  return fetchJson(`/api/projects/${projectId}/sorting`, z.unknown(), post({}));
}
