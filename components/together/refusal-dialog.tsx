"use client";

import type { ReactNode } from "react";
import type { Refusal } from "@/components/together/command-queue";
import { Button } from "@/components/ui/button";
import { Dialog, DialogAnswers } from "@/components/ui/dialog";
import { LocalTime } from "@/components/ui/local-time";
import type { Board } from "@/lib/board/model";
import { describeSubject } from "@/lib/board/subject-words";

interface RefusalDialogProps {
  /** The board as it is now. */
  readonly board: Board;
  readonly refusals: readonly Refusal[];
  readonly onAnswer: (refusal: Refusal, answer: "leave" | "again") => void;
}

/** What was asked for and could not be done, one after another: what the person saw, what is there now, and what to do. */
export function RefusalDialog({ board, refusals, onAnswer }: RefusalDialogProps) {
  const [refusal] = refusals;
  if (!refusal) return null;
  const { given, detail, conflict, follows } = refusal;
  const canRepeat = refusal.isRepeatable || (conflict !== null && !given.command.type.startsWith("undo"));
  const leave = () => onAnswer(refusal, "leave");
  return (
    <Dialog isOpen onOpenChange={(isOpen) => !isOpen && leave()} title={titleOf(refusal)} description={<p>{detail}</p>}>
      <dl className="space-y-3">
        <State term="You asked for">{capital(given.sentence)}</State>
        {conflict && (
          <>
            <State term="You saw">{given.seen[conflict.subjectId] ?? "It was not there yet, or not named."}</State>
            <State term="Now">{presentText(board, refusal)}</State>
          </>
        )}
        {conflict?.lastChange && (
          <State term="Changed by">
            {conflict.lastChange.person ?? "Stackyard"} {conflict.lastChange.sentence}{" "}
            <LocalTime atMs={conflict.lastChange.atMs} />
          </State>
        )}
        {follows && <State term="It rested on">{capital(follows.sentence)}, which could not be done either.</State>}
      </dl>
      {refusals.length > 1 && (
        <p className="mt-4 text-sm text-quiet">
          {refusals.length === 2 ? "One more change" : `${refusals.length - 1} more changes`} could not be done; you are
          asked about each.
        </p>
      )}
      <DialogAnswers>
        {canRepeat && (
          // What another did since would be lost by doing it again; trying again costs nobody anything.
          <Button tone={conflict ? "plain" : "petrol"} onClick={() => onAnswer(refusal, "again")}>
            {refusal.isRepeatable ? "Try again" : "Do it again"}
          </Button>
        )}
        <Button onClick={leave}>{canRepeat ? "Leave it" : "Close"}</Button>
      </DialogAnswers>
    </Dialog>
  );
}

function State({ term, children }: { readonly term: string; readonly children: ReactNode }) {
  return (
    <div>
      <dt className="text-sm text-quiet">{term}</dt>
      <dd className="break-words">{children}</dd>
    </div>
  );
}

function titleOf({ conflict, isRepeatable, given }: Refusal): string {
  if (conflict) return given.command.type === "undo" ? "This cannot be undone" : "This has changed meanwhile";
  return isRepeatable ? "The server could not do this" : "This was not done";
}

/** In words of the newest board; where it does not show the subject, of what the server sent. */
function presentText(board: Board, { conflict }: Refusal): string {
  if (!conflict) return "";
  const text = describeSubject(board, conflict.subjectId);
  if (text !== null) return text;
  if (conflict.present?.kind === "frame") return `${conflict.present.frame.name} is somewhere else`;
  return "It is no longer there";
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
