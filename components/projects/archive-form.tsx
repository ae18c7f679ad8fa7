"use client";

import { useActionState } from "react";
import { Button } from "@/components/ui/button";
import { FormMessage } from "@/components/ui/form-message";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

interface ArchiveFormProps {
  readonly project: { readonly id: string; readonly isArchived: boolean };
  readonly action: FormAction;
}

export function ArchiveForm({ project, action }: ArchiveFormProps) {
  const [state, submit, isBusy] = useActionState(action, UNTOUCHED_FORM);
  return (
    <form action={submit} className="mt-4 space-y-4">
      <FormMessage state={state} />
      <input type="hidden" name="projectId" value={project.id} />
      <input type="hidden" name="isArchived" value={String(!project.isArchived)} />
      <Button type="submit" isBusy={isBusy}>
        {project.isArchived ? "Take out of the archive" : "Put in the archive"}
      </Button>
    </form>
  );
}
