"use client";

import { Dialog as Radix } from "radix-ui";
import { useState, type ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

interface DialogProps {
  readonly isOpen: boolean;
  readonly onOpenChange: (isOpen: boolean) => void;
  readonly title: string;
  /** One or two sentences under the title; read out when the dialog opens. */
  readonly description?: ReactNode;
  readonly children: ReactNode;
  /** wide: for pictures side by side. */
  readonly size?: "regular" | "wide";
}

/** A window over the page that must be answered or closed: focus stays in it, Escape closes it, focus goes back. */
export function Dialog({ isOpen, onOpenChange, ...content }: DialogProps) {
  return (
    <Radix.Root open={isOpen} onOpenChange={onOpenChange}>
      {isOpen && <DialogContent {...content} />}
    </Radix.Root>
  );
}

function DialogContent({
  title,
  description,
  children,
  size = "regular",
}: Omit<DialogProps, "isOpen" | "onOpenChange">) {
  // Read while this is drawn for the first time: a menu that it was chosen from is still there.
  const [opener] = useState(findOpener);
  return (
    <Radix.Portal>
      <Radix.Overlay className="fixed inset-0 z-40 bg-well/70" />
      <Radix.Content
        {...(description === undefined ? { "aria-describedby": undefined } : {})}
        onCloseAutoFocus={(event) => {
          event.preventDefault();
          opener?.focus();
        }}
        className={classNames(
          "fixed top-1/2 left-1/2 z-50 max-h-[calc(100dvh-2rem)] w-[calc(100vw-2rem)] -translate-x-1/2 -translate-y-1/2 overflow-y-auto border border-ink bg-paper p-6 text-ink shadow-float",
          size === "wide" ? "max-w-[90rem]" : "max-w-[34rem]",
        )}
      >
        <Radix.Title className="text-xl font-bold">{title}</Radix.Title>
        {description !== undefined && (
          <Radix.Description asChild>
            <div className="mt-2 text-ink">{description}</div>
          </Radix.Description>
        )}
        <div className="mt-5">{children}</div>
      </Radix.Content>
    </Radix.Portal>
  );
}

/** What has the focus; where that is an item of a menu, which closes, the button of the menu. */
function findOpener(): HTMLElement | null {
  const focused = document.activeElement;
  const trigger = focused?.closest('[role="menu"]')?.getAttribute("aria-labelledby");
  if (trigger) return document.getElementById(trigger);
  return focused instanceof HTMLElement ? focused : null;
}

/** The row of answers at the foot of a dialog; the recommended one first. */
export function DialogAnswers({ children }: { readonly children: ReactNode }) {
  return <div className="mt-6 flex flex-wrap gap-3">{children}</div>;
}
