"use client";

import { useActionState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog, DialogAnswers } from "@/components/ui/dialog";
import { Field } from "@/components/ui/field";
import { FormMessage } from "@/components/ui/form-message";
import { UNTOUCHED_FORM, type FormAction, type FormState } from "@/lib/http/form-state";

interface RenameDialogProps {
  readonly project: { readonly id: string; readonly name: string };
  readonly action: FormAction;
  readonly isOpen: boolean;
  readonly onOpenChange: (isOpen: boolean) => void;
}

export function RenameDialog({ isOpen, onOpenChange, ...rest }: RenameDialogProps) {
  return (
    <Dialog isOpen={isOpen} onOpenChange={onOpenChange} title="Rename project">
      <RenameForm {...rest} onDone={() => onOpenChange(false)} />
    </Dialog>
  );
}

type RenameFormProps = Pick<RenameDialogProps, "project" | "action"> & { readonly onDone: () => void };

function RenameForm({ project, action, onDone }: RenameFormProps) {
  const [state, submit, isBusy] = useActionState(async (before: FormState, form: FormData) => {
    const after = await action(before, form);
    if (after.status === "done") onDone();
    return after;
  }, UNTOUCHED_FORM);
  return (
    <form action={submit}>
      <FormMessage state={state} />
      <input type="hidden" name="projectId" value={project.id} />
      <Field
        name="name"
        label="Name"
        defaultValue={state.values.name ?? project.name}
        error={state.fields.name}
        required
        autoComplete="off"
      />
      <DialogAnswers>
        <Button type="submit" tone="petrol" isBusy={isBusy}>
          Rename
        </Button>
        <Button onClick={onDone}>Keep the name</Button>
      </DialogAnswers>
    </form>
  );
}
