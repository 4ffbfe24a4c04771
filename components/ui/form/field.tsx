import { type ReactNode, useId } from "react";
import { cn } from "@/lib/cn";

/** What a control has to carry so that label, hint and error belong to it. */
export interface ControlProps {
  id: string;
  "aria-describedby": string | undefined;
  "aria-invalid": true | undefined;
  required: boolean | undefined;
}

export interface FieldTexts {
  label: ReactNode;
  hint?: ReactNode;
  /** A plain sentence: what is wrong and what to do. */
  error?: ReactNode;
  required?: boolean;
}

export interface FieldProps extends FieldTexts {
  className?: string;
  children: (control: ControlProps) => ReactNode;
}

/** Label above, hint below it, control, error under the control. For a control that has no own component. */
export function Field({ label, hint, error, required, className, children }: FieldProps) {
  const id = useId();
  const hintId = hint ? `${id}-hint` : undefined;
  const errorId = error ? `${id}-error` : undefined;
  return (
    <div className={cn("flex min-w-0 flex-col gap-1", className)}>
      <label htmlFor={id} className="font-semibold text-15">
        {label}
        {required && <span className="ml-2 font-normal text-13 text-ink2">required</span>}
      </label>
      {hint && (
        <p id={hintId} className="text-13 text-ink2">
          {hint}
        </p>
      )}
      {children({
        id,
        "aria-describedby": [errorId, hintId].filter(Boolean).join(" ") || undefined,
        "aria-invalid": error ? true : undefined,
        required: required || undefined,
      })}
      {error && <FieldError id={errorId}>{error}</FieldError>}
    </div>
  );
}

/** The sentence under a control that was refused. */
export function FieldError({ id, children }: { id?: string; children: ReactNode }) {
  return (
    <p id={id} className="flex gap-1.5 font-medium text-13 text-unmet">
      <svg aria-hidden="true" viewBox="0 0 16 16" className="mt-0.5 size-3.5 shrink-0">
        <path fill="currentColor" d="M5 1h6l4 4v6l-4 4H5l-4-4V5z" />
        <path className="stroke-surface" strokeWidth="2" d="m5.5 5.5 5 5m0-5-5 5" />
      </svg>
      <span>{children}</span>
    </p>
  );
}

/** Class names of every boxed control. */
export const controlBox =
  "w-full min-h-control rounded border border-edge bg-surface px-3 py-2 text-ink placeholder:text-ink2 hover:border-ink aria-invalid:border-2 aria-invalid:border-unmet disabled:cursor-not-allowed disabled:bg-sunk disabled:text-ink2";
