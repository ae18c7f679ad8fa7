"use client";

import { Redo2, Undo2 } from "lucide-react";
import { useEffect, type ReactNode } from "react";
import { useBoardCommands } from "@/components/board/board-commands";

/** Takes back one's own steps, and does them again: buttons in the bar, and the platform's keys. */
export function UndoButtons() {
  const { canEdit, undoable, redoable, undo, redo } = useBoardCommands();
  useUndoKeys(canEdit, undo, redo);
  if (!canEdit) return null;
  return (
    <div role="group" aria-label="Your changes" className="flex gap-1">
      <BarButton label="Undo" what={undoable} nothing="You have changed nothing that could be undone." onPress={undo}>
        <Undo2 aria-hidden className="size-4" />
      </BarButton>
      <BarButton label="Redo" what={redoable} nothing="You have undone nothing." onPress={redo}>
        <Redo2 aria-hidden className="size-4" />
      </BarButton>
    </div>
  );
}

interface BarButtonProps {
  readonly label: string;
  /** What it would take back; null: nothing. */
  readonly what: string | null;
  readonly nothing: string;
  readonly onPress: () => void;
  readonly children: ReactNode;
}

// The title is its description, also aloud. Not `disabled`: focus stays where it is when the last step is taken back, and the reason can be read.
function BarButton({ label, what, nothing, onPress, children }: BarButtonProps) {
  return (
    <button
      type="button"
      aria-disabled={what === null}
      title={what === null ? nothing : `${label}: ${what}`}
      onClick={() => what !== null && onPress()}
      className="inline-flex min-h-8 items-center gap-1.5 px-1.5 font-semibold underline-offset-4 hover:underline aria-disabled:text-quiet aria-disabled:no-underline pointer-coarse:min-h-11 pointer-coarse:min-w-11"
    >
      {children}
      {label}
    </button>
  );
}

/** Ctrl or Cmd with Z; with Shift, or Ctrl with Y, forward again. Text fields keep their own. */
function useUndoKeys(isEnabled: boolean, undo: () => void, redo: () => void): void {
  useEffect(() => {
    if (!isEnabled) return;
    const onKeyDown = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || event.defaultPrevented || isTextField(event.target))
        return;
      const key = event.key.toLowerCase();
      const isRedo = (key === "z" && event.shiftKey) || (key === "y" && event.ctrlKey && !event.shiftKey);
      if (key !== "z" && !isRedo) return;
      // A dialog stands over the board: what happens behind it would not be seen.
      if (document.querySelector('[role="dialog"], [role="alertdialog"]')) return;
      event.preventDefault();
      if (isRedo) redo();
      else undo();
    };
    window.addEventListener("keydown", onKeyDown);
    return () => window.removeEventListener("keydown", onKeyDown);
  }, [isEnabled, undo, redo]);
}

function isTextField(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false;
  if (target.isContentEditable || target instanceof HTMLTextAreaElement) return true;
  return target instanceof HTMLInputElement && !["checkbox", "radio", "button", "range"].includes(target.type);
}
