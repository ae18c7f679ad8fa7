"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { Button } from "@/components/ui/button";
import { Dialog, DialogAnswers } from "@/components/ui/dialog";
import { Notice } from "@/components/ui/notice";
import { LocalTime } from "@/components/ui/local-time";
import type { RecordEntry } from "@/lib/board/command-answers";
import { sendCommand } from "@/lib/board/mutations";
import { boardKeys, stepsAfterQuery } from "@/lib/board/queries";
import { countOf } from "@/lib/board/words";
import { newId } from "@/lib/ids";

interface UndoBackDialogProps {
  readonly projectId: string;
  /** The step that stays as the last one. */
  readonly entry: RecordEntry;
  readonly onClose: () => void;
}

/** Asks before everything after a step is taken back: how many steps, and whose. */
export function UndoBackDialog({ projectId, entry, onClose }: UndoBackDialogProps) {
  const client = useQueryClient();
  const later = useQuery(stepsAfterQuery(projectId, entry.revision));
  const going = useMutation({
    mutationFn: () => {
      const revision = entry.revision;
      return sendCommand(projectId, { id: newId(), revision, type: "undo-back-to", toRevision: revision });
    },
    onSuccess: async () => {
      await client.invalidateQueries({ queryKey: boardKeys.all(projectId) });
      onClose();
    },
  });
  const problem = going.error ?? later.error;
  return (
    <Dialog
      isOpen
      onOpenChange={(isOpen) => !isOpen && onClose()}
      title="Undo back to here?"
      description={
        <>
          <p>
            The board goes back to how it was after “{entry.person?.name ?? "Stackyard"} {entry.sentence}”,{" "}
            <LocalTime atMs={entry.atMs} withSeconds />.
          </p>
          <p className="mt-2" role="status">
            {later.data ? stepsText(later.data) : "Counting the steps…"} This is one new step in the record and can be
            undone like any other.
          </p>
        </>
      }
    >
      {problem && (
        <Notice tone="madder" live="alert">
          {problem.message}
        </Notice>
      )}
      <DialogAnswers>
        <Button disabled={!later.data?.length} isBusy={going.isPending} onClick={() => going.mutate()}>
          Undo back to here
        </Button>
        <Button onClick={onClose}>Leave it</Button>
      </DialogAnswers>
    </Dialog>
  );
}

/** "5 steps are undone: 3 of Mona, 2 of Jonas." */
export function stepsText(later: readonly { readonly name: string; readonly count: number }[]): string {
  const all = later.reduce((sum, { count }) => sum + count, 0);
  if (all === 0) return "Nothing done since still stands.";
  const whose = later.map(({ name, count }) => `${count} of ${name}`).join(", ");
  return `${countOf(all, "step")} ${all === 1 ? "is" : "are"} undone: ${whose}.`;
}
