"use client";

import { useActionState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog, DialogAnswers } from "@/components/ui/dialog";
import { Field } from "@/components/ui/field";
import { countOf, bytesText } from "@/lib/board/words";
import { FormMessage } from "@/components/ui/form-message";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

interface DeleteDialogProps {
  readonly project: {
    readonly id: string;
    readonly name: string;
    readonly frames: number;
    readonly bytes: number;
  };
  readonly action: FormAction;
  readonly isOpen: boolean;
  readonly onOpenChange: (isOpen: boolean) => void;
}

/** Deleting takes the originals stored here with it, so the name has to be typed. */
export function DeleteDialog({ project, action, isOpen, onOpenChange }: DeleteDialogProps) {
  const { name, frames, bytes } = project;
  return (
    <Dialog
      isOpen={isOpen}
      onOpenChange={onOpenChange}
      title={`Delete ${name}?`}
      description={
        <p>
          This deletes the {countOf(frames, "frame")} stored here with their previews, the board and everything decided
          on it, for everyone in the project. It frees {bytesText(bytes).replace(" ", "\u00a0")} or a little more and
          cannot be taken back.
        </p>
      }
    >
      <DeleteForm project={project} action={action} onCancel={() => onOpenChange(false)} />
    </Dialog>
  );
}

type DeleteFormProps = Pick<DeleteDialogProps, "project" | "action"> & { readonly onCancel: () => void };

function DeleteForm({ project, action, onCancel }: DeleteFormProps) {
  const [state, submit, isBusy] = useActionState(action, UNTOUCHED_FORM);
  return (
    <form action={submit} className="space-y-4">
      <FormMessage state={state} />
      <input type="hidden" name="projectId" value={project.id} />
      <Field
        name="confirmation"
        label={
          <>
            Type the name to confirm: <span className="font-normal">{project.name}</span>
          </>
        }
        defaultValue={state.values.confirmation}
        error={state.fields.confirmation}
        required
        autoComplete="off"
        spellCheck={false}
      />
      <DialogAnswers>
        <Button type="submit" tone="madder" isBusy={isBusy}>
          {isBusy ? "Deleting …" : "Delete the project"}
        </Button>
        <Button onClick={onCancel}>Keep it</Button>
      </DialogAnswers>
    </form>
  );
}
