"use client";

import { Ellipsis } from "lucide-react";
import Link from "next/link";
import { useState, useTransition } from "react";
import { DeleteDialog } from "@/components/projects/delete-dialog";
import type { ProjectActions } from "@/components/projects/project-actions";
import { RenameDialog } from "@/components/projects/rename-dialog";
import { UNTOUCHED_FORM } from "@/lib/http/form-state";
import { Notice } from "@/components/ui/notice";
import { Menu, MenuItem, MenuLine, MenuLink } from "@/components/ui/menu";

interface ProjectMenuProps {
  readonly project: {
    readonly id: string;
    readonly name: string;
    readonly bytes: number;
    readonly frames: number;
    readonly isArchived: boolean;
  };
  readonly actions: ProjectActions;
}

/** What a lead can do to a project from the list. */
export function ProjectMenu({ project, actions }: ProjectMenuProps) {
  const [dialog, setDialog] = useState<"rename" | "delete" | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const [isBusy, startTransition] = useTransition();
  const close = (isOpen: boolean) => setDialog((now) => (isOpen ? now : null));

  function toggleArchive() {
    setProblem(null);
    startTransition(async () => {
      const state = await actions.archive(UNTOUCHED_FORM, archiveForm(project.id, !project.isArchived));
      if (state.status === "refused") setProblem(state.message);
    });
  }

  return (
    <>
      <Menu label={`More for ${project.name}`} trigger={<Ellipsis aria-hidden size={20} />}>
        {!project.isArchived && <MenuItem onSelect={() => setDialog("rename")}>Rename</MenuItem>}
        {!project.isArchived && (
          <MenuLink>
            <Link href={`/projects/${project.id}/settings`}>Settings</Link>
          </MenuLink>
        )}
        <MenuItem onSelect={toggleArchive} isDisabled={isBusy}>
          {project.isArchived ? "Take out of the archive" : "Put in the archive"}
        </MenuItem>
        <MenuLine />
        <MenuItem tone="madder" onSelect={() => setDialog("delete")}>
          Delete
        </MenuItem>
      </Menu>
      {problem !== null && <Notice tone="madder" live="alert" title={problem} />}
      <RenameDialog project={project} action={actions.rename} isOpen={dialog === "rename"} onOpenChange={close} />
      <DeleteDialog project={project} action={actions.remove} isOpen={dialog === "delete"} onOpenChange={close} />
    </>
  );
}

function archiveForm(projectId: string, isArchived: boolean): FormData {
  const form = new FormData();
  form.set("projectId", projectId);
  form.set("isArchived", String(isArchived));
  return form;
}
