"use client";

import { useState } from "react";
import { DeleteDialog } from "@/components/projects/delete-dialog";
import { Button } from "@/components/ui/button";
import type { FormAction } from "@/lib/http/form-state";

interface DeleteButtonProps {
  readonly project: { readonly id: string; readonly name: string; readonly frames: number; readonly bytes: number };
  readonly action: FormAction;
}

export function DeleteButton({ project, action }: DeleteButtonProps) {
  const [isOpen, setOpen] = useState(false);
  const { id, name, frames, bytes } = project;
  return (
    <>
      <Button tone="madder" className="mt-4" aria-haspopup="dialog" onClick={() => setOpen(true)}>
        Delete the project
      </Button>
      <DeleteDialog project={{ id, name, frames, bytes }} action={action} isOpen={isOpen} onOpenChange={setOpen} />
    </>
  );
}
