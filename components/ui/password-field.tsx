"use client";

import { useState, type ComponentProps } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";

type PasswordFieldProps = Omit<ComponentProps<typeof Field>, "type" | "unit" | "action"> & {
  readonly autoComplete: "current-password" | "new-password";
};

/** A password that can be looked at while it is typed (WCAG 2.2, 3.3.8: pasting and password managers work too). */
export function PasswordField(props: PasswordFieldProps) {
  const [isShown, setShown] = useState(false);
  return (
    <Field
      {...props}
      type={isShown ? "text" : "password"}
      autoCapitalize="none"
      autoCorrect="off"
      spellCheck={false}
      action={
        <Button
          aria-pressed={isShown}
          aria-label={`Show ${String(props.name)} as text`}
          onClick={() => setShown(!isShown)}
        >
          {isShown ? "Hide" : "Show"}
        </Button>
      }
    />
  );
}
