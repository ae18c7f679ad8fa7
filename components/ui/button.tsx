import Link from "next/link";
import type { ComponentProps, ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

/** petrol: the one recommended action; madder: what cannot be taken back; bare: no outline, for bars. */
export type ButtonTone = "plain" | "petrol" | "madder" | "bare";
export type ButtonSize = "regular" | "slim";

interface Appearance {
  readonly tone?: ButtonTone;
  readonly size?: ButtonSize;
}

const TONES: Record<ButtonTone, string> = {
  plain: "border border-ink bg-paper text-ink hover:bg-ink hover:text-paper",
  petrol: "border border-petrol bg-petrol text-petrol-on hover:border-ink hover:bg-ink hover:text-paper",
  madder: "border border-madder bg-paper text-madder hover:bg-madder hover:text-paper",
  bare: "border border-transparent text-ink underline-offset-4 hover:underline",
};

const SIZES: Record<ButtonSize, string> = {
  regular: "min-h-10 px-4 py-1.5",
  slim: "min-h-7 px-2.5 py-0.5 text-sm",
};

// The disabled state is told by a dashed edge as well as by paler ink.
const SHARED =
  "inline-flex items-center justify-center gap-2 text-center font-semibold no-underline select-none pointer-coarse:min-h-11 pointer-coarse:min-w-11 disabled:pointer-events-none disabled:border-dashed disabled:border-line disabled:bg-transparent disabled:text-quiet aria-disabled:opacity-60";

/** The classes of a button, for elements that are neither `button` nor a link of ours (a menu trigger, a file label). */
export function buttonClass({ tone = "plain", size = "regular" }: Appearance = {}): string {
  return classNames(SHARED, TONES[tone], SIZES[size]);
}

/** A button. Its text is a plain verb. While `isBusy` it cannot be pressed again and says so. */
export function Button({
  tone,
  size,
  isBusy = false,
  className,
  children,
  disabled,
  type = "button",
  ...rest
}: Appearance & ComponentProps<"button"> & { readonly isBusy?: boolean; readonly children: ReactNode }) {
  return (
    <button
      type={type}
      disabled={disabled === true || isBusy}
      aria-busy={isBusy || undefined}
      className={classNames(buttonClass({ tone, size }), className)}
      {...rest}
    >
      {children}
    </button>
  );
}

/** A link that looks like a button: it goes somewhere and changes nothing. */
export function LinkButton({
  tone,
  size,
  className,
  ...rest
}: Appearance & ComponentProps<typeof Link> & { readonly children: ReactNode }) {
  return <Link className={classNames(buttonClass({ tone, size }), className)} {...rest} />;
}
