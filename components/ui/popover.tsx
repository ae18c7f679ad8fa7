"use client";

import { Popover as Radix } from "radix-ui";
import type { ComponentProps, ReactNode } from "react";

interface PopoverProps {
  /** The button that opens it: attributes and content. */
  readonly trigger: ComponentProps<"button">;
  readonly label: string;
  readonly children: ReactNode;
}

/** A few controls that belong to a spot of the page, and may be pressed one after another; Escape closes them. */
export function Popover({ trigger, label, children }: PopoverProps) {
  return (
    <Radix.Root>
      <Radix.Trigger type="button" {...trigger} />
      <Radix.Portal>
        <Radix.Content
          aria-label={label}
          sideOffset={4}
          collisionPadding={8}
          side="right"
          className="z-50 max-w-80 border border-ink bg-paper p-3 text-ink shadow-float"
        >
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
