import { z } from "zod";
import { commandAnswerSchema, GIVEN_BY_HEADER, type CommandAnswer } from "@/lib/board/command-answers";
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

/**
 * Sends one command. The same id again is applied once and answered the same.
 * @param givenBy - whose command it is, where it has waited: where somebody else is signed in by now, it is not done in their name (401)
 * @throws FetchProblem
 */
export function sendCommand(projectId: string, command: BoardCommand, givenBy?: string): Promise<CommandAnswer> {
  const init = post(command);
  const headers = { ...init.headers, ...(givenBy === undefined ? {} : { [GIVEN_BY_HEADER]: givenBy }) };
  return fetchJson(`/api/projects/${projectId}/commands`, commandAnswerSchema, { ...init, headers });
}

/** Asks the worker to sort anew what nobody decided. @throws FetchProblem */
export function askToSort(projectId: string): Promise<unknown> {
  return fetchJson(`/api/projects/${projectId}/sorting`, z.unknown(), post({}));
}
