"use client";

import { useActionState, type ComponentProps } from "react";
import { ProjectFields } from "@/components/projects/project-fields";
import { Button, LinkButton } from "@/components/ui/button";
import { FormMessage } from "@/components/ui/form-message";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

interface NewProjectFormProps {
  readonly action: FormAction;
  readonly initial: ComponentProps<typeof ProjectFields>["initial"];
}

export function NewProjectForm({ action, initial }: NewProjectFormProps) {
  const [state, submit, isBusy] = useActionState(action, UNTOUCHED_FORM);
  return (
    <form action={submit} className="mt-6 max-w-md space-y-6">
      <FormMessage state={state} />
      <ProjectFields state={state} initial={initial} />
      <div className="flex flex-wrap gap-3">
        <Button type="submit" tone="petrol" isBusy={isBusy}>
          Make the project
        </Button>
        <LinkButton href="/projects" tone="bare">
          Back to the projects
        </LinkButton>
      </div>
    </form>
  );
}
