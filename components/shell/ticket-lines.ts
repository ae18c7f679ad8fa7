import { countOf } from "@/lib/board/words";

/** What the job ticket and the list of projects need to know of a project. Counts of files are those of `/progress`. */
export interface TicketStatus {
  readonly received: number;
  readonly analysed: number;
  readonly failed: number;
  readonly total: number;
  readonly sorted: boolean;
  readonly frames: number;
  readonly tiles: number;
  readonly openQuestions: number;
}

/** ochre: needs a decision; madder: failure; quiet: nothing to say yet. */
export interface TicketLine {
  readonly text: string;
  readonly tone: "quiet" | "ink" | "ochre" | "madder";
}

/** The one live line of each stub: how far that step is. */
export function ticketLines(status: TicketStatus): Record<"intake" | "board" | "handover", TicketLine> {
  return { intake: intakeLine(status), board: boardLine(status), handover: handoverLine(status) };
}

function intakeLine({ received, analysed, failed, total, frames }: TicketStatus): TicketLine {
  if (total === 0) return { text: "nothing yet", tone: "quiet" };
  // How many more wait in the browser is not known here.
  if (received < total)
    return { text: received === 0 ? "on the way" : `${countOf(received, "file")} in, more to come`, tone: "ink" };
  if (analysed + failed < received)
    return { text: `${analysed + failed} of ${countOf(received, "file")} measured`, tone: "ink" };
  if (failed > 0) return { text: `${countOf(frames, "frame")}, ${failed} unreadable`, tone: "madder" };
  return { text: countOf(frames, "frame"), tone: "ink" };
}

function boardLine({ received, sorted, tiles, openQuestions }: TicketStatus): TicketLine {
  if (received === 0) return { text: "not yet", tone: "quiet" };
  if (!sorted && tiles === 0) return { text: "sorting", tone: "ink" };
  if (!sorted) return { text: `${countOf(tiles, "tile")}, sorting again`, tone: "ink" };
  if (openQuestions > 0)
    return { text: `${countOf(tiles, "tile")}, ${countOf(openQuestions, "question")}`, tone: "ochre" };
  if (tiles === 0) return { text: "no tiles found", tone: "madder" };
  return { text: `${countOf(tiles, "tile")}, no questions`, tone: "ink" };
}

function handoverLine({ tiles, openQuestions }: TicketStatus): TicketLine {
  // While it is sorted again the board stands as it was, and so does what can be handed over.
  if (tiles === 0) return { text: "not yet", tone: "quiet" };
  if (openQuestions > 0) return { text: `ready, ${openQuestions} open`, tone: "ochre" };
  return { text: "ready", tone: "ink" };
}
