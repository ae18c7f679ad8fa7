"use client";

import { DropdownMenu } from "radix-ui";
import type { ReactNode } from "react";
import { buttonClass, type ButtonSize, type ButtonTone } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";

interface MenuProps {
  /** What the trigger shows. */
  readonly trigger: ReactNode;
  /** The trigger's name, where what it shows does not say it. */
  readonly label?: string;
  readonly tone?: ButtonTone;
  readonly size?: ButtonSize;
  readonly align?: "start" | "end";
  /** Of the trigger, beside the tone's. */
  readonly className?: string;
  readonly tabIndex?: number;
  readonly children: ReactNode;
}

/** A button that opens a list of actions: arrows, Home, End and first letters move in it, Escape closes it. */
export function Menu({ trigger, label, tone = "bare", size = "slim", align = "end", ...rest }: MenuProps) {
  const { className, tabIndex, children } = rest;
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger
        aria-label={label}
        tabIndex={tabIndex}
        className={classNames(buttonClass({ tone, size }), className)}
      >
        {trigger}
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align={align}
          sideOffset={4}
          collisionPadding={8}
          className="z-50 max-h-(--radix-dropdown-menu-content-available-height) min-w-48 overflow-y-auto border border-ink bg-paper py-1 text-ink shadow-float"
        >
          {children}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}

const ITEM =
  "flex min-h-9 cursor-pointer items-center gap-2 px-3 py-1.5 outline-none select-none pointer-coarse:min-h-11 data-[disabled]:cursor-default data-[disabled]:text-quiet data-[highlighted]:bg-ink data-[highlighted]:text-paper";

interface MenuItemProps {
  readonly onSelect: () => void;
  readonly isDisabled?: boolean;
  readonly tone?: "ink" | "madder";
  readonly children: ReactNode;
}

export function MenuItem({ onSelect, isDisabled = false, tone = "ink", children }: MenuItemProps) {
  return (
    <DropdownMenu.Item
      onSelect={onSelect}
      disabled={isDisabled}
      className={classNames(ITEM, tone === "madder" && "text-madder data-[highlighted]:bg-madder")}
    >
      {children}
    </DropdownMenu.Item>
  );
}

/** An item that goes somewhere: give it a link as its only child. */
export function MenuLink({ children }: { readonly children: ReactNode }) {
  return (
    <DropdownMenu.Item asChild className={ITEM}>
      {children}
    </DropdownMenu.Item>
  );
}

interface MenuChoiceProps<Value extends string> {
  readonly label: string;
  readonly value: Value;
  readonly choices: readonly { readonly value: Value; readonly label: string }[];
  readonly onChange: (value: Value) => void;
}

/** One of several, the present one marked. */
export function MenuChoice<Value extends string>({ label, value, choices, onChange }: MenuChoiceProps<Value>) {
  return (
    <DropdownMenu.RadioGroup
      value={value}
      onValueChange={(chosen) => {
        const choice = choices.find((candidate) => candidate.value === chosen);
        if (choice) onChange(choice.value);
      }}
    >
      <DropdownMenu.Label className="px-3 pt-2 pb-1 text-sm text-quiet">{label}</DropdownMenu.Label>
      {choices.map((choice) => (
        <DropdownMenu.RadioItem key={choice.value} value={choice.value} className={ITEM}>
          <span aria-hidden className="inline-block w-4 text-center">
            <DropdownMenu.ItemIndicator>■</DropdownMenu.ItemIndicator>
          </span>
          {choice.label}
        </DropdownMenu.RadioItem>
      ))}
    </DropdownMenu.RadioGroup>
  );
}

export function MenuLine() {
  return <DropdownMenu.Separator className="my-1 h-px bg-hairline" />;
}
