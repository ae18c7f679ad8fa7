"use client";

import { useActionState, type ComponentProps } from "react";
import { ProjectFields } from "@/components/projects/project-fields";
import { Button } from "@/components/ui/button";
import { FormMessage } from "@/components/ui/form-message";
import { UNTOUCHED_FORM, type FormAction } from "@/lib/http/form-state";

interface SettingsFormProps {
  readonly project: ComponentProps<typeof ProjectFields>["initial"] & { readonly id: string };
  readonly action: FormAction;
}

export function SettingsForm({ project, action }: SettingsFormProps) {
  const [state, submit, isBusy] = useActionState(action, UNTOUCHED_FORM);
  const { name, overlapWanted, framesPerTile } = project;
  return (
    <form action={submit} className="mt-6 max-w-md space-y-6">
      <FormMessage state={state} />
      <input type="hidden" name="projectId" value={project.id} />
      <ProjectFields state={state} initial={{ name, overlapWanted, framesPerTile }} />
      <Button type="submit" tone="petrol" isBusy={isBusy}>
        {isBusy ? "Saving …" : "Save the settings"}
      </Button>
    </form>
  );
}
