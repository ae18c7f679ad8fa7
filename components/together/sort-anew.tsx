"use client";

import { useMutation } from "@tanstack/react-query";
import { useState } from "react";
import { useBoardCommands } from "@/components/board/board-commands";
import { Button } from "@/components/ui/button";
import { Dialog, DialogAnswers } from "@/components/ui/dialog";
import { Notice } from "@/components/ui/notice";
import { askToSort } from "@/lib/board/mutations";

/** Has the frames sorted again; asked for once more, because it may move what nobody looked at yet. */
export function SortAnew({ projectId }: { readonly projectId: string }) {
  const { canEdit } = useBoardCommands();
  const [isOpen, setIsOpen] = useState(false);
  if (!canEdit) return null;
  return (
    <>
      <Button size="slim" tone="bare" onClick={() => setIsOpen(true)}>
        Sort again
      </Button>
      {isOpen && <SortAnewDialog projectId={projectId} onClose={() => setIsOpen(false)} />}
    </>
  );
}

function SortAnewDialog({ projectId, onClose }: { readonly projectId: string; readonly onClose: () => void }) {
  const { announce } = useBoardCommands();
  const asking = useMutation({
    mutationFn: () => askToSort(projectId),
    onSuccess: () => {
      onClose();
      announce("The frames are sorted again. The board changes by itself when that is done.");
    },
  });
  return (
    <Dialog
      isOpen
      onOpenChange={(isOpen) => !isOpen && onClose()}
      title="Sort the frames again?"
      description={
        <p>
          What nobody decided is found again from the pictures and their times: which frames belong together, and where
          each stack lies. Everything that a person placed, set aside or settled stays as it is.
        </p>
      }
    >
      {asking.error && (
        <Notice tone="madder" live="alert">
          {asking.error.message}
        </Notice>
      )}
      <DialogAnswers>
        <Button tone="petrol" isBusy={asking.isPending} onClick={() => asking.mutate()}>
          Sort again
        </Button>
        <Button onClick={onClose}>Keep it as it is</Button>
      </DialogAnswers>
    </Dialog>
  );
}
