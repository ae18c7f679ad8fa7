import { useId, type ComponentProps, type ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

type FieldProps = Omit<ComponentProps<"input">, "id" | "children" | "action"> & {
  readonly name: string;
  readonly label: ReactNode;
  /** What is expected, before anything is wrong. */
  readonly hint?: ReactNode;
  /** What is wrong with what was entered and how to mend it. */
  readonly error?: string | undefined;
  /** Written after the input, such as "%". */
  readonly unit?: string;
  /** A button that belongs to the input, after it. */
  readonly action?: ReactNode;
};

/** One labelled input; its hint and its error are tied to it for screen readers. */
export function Field({ label, hint, error, unit, action, className, ...input }: FieldProps) {
  const id = useId();
  const hintId = hint === undefined ? undefined : `${id}-hint`;
  const errorId = error === undefined ? undefined : `${id}-error`;
  return (
    <div className={className}>
      <label htmlFor={id} className="block font-semibold">
        {label}
      </label>
      {hint !== undefined && (
        <p id={hintId} className="text-sm text-quiet">
          {hint}
        </p>
      )}
      <div className="mt-1 flex items-center gap-2">
        <input
          {...input}
          id={id}
          aria-invalid={error === undefined ? undefined : true}
          aria-describedby={classNames(errorId, hintId) || undefined}
          className={classNames(
            "min-h-10 w-full min-w-0 border bg-paper px-3 py-1.5 text-ink placeholder:text-quiet pointer-coarse:min-h-11",
            error === undefined ? "border-line" : "border-2 border-madder",
            unit !== undefined && "figures max-w-24",
          )}
        />
        {unit !== undefined && <span className="text-quiet">{unit}</span>}
        {action}
      </div>
      {error !== undefined && (
        <p id={errorId} className="mt-1 text-sm font-semibold text-madder">
          {error}
        </p>
      )}
    </div>
  );
}
