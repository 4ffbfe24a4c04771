import { type ComponentProps, type ReactNode, useId } from "react";
import { FieldError } from "@/components/ui/form/field";
import { cn } from "@/lib/cn";

export interface CheckboxProps extends Omit<ComponentProps<"input">, "id" | "type"> {
  label: ReactNode;
  hint?: ReactNode;
  error?: ReactNode;
}

/** Yes or no. The whole line is the target. */
export function Checkbox({ label, hint, error, className, ...rest }: CheckboxProps) {
  const id = useId();
  const hintId = hint ? `${id}-hint` : undefined;
  const errorId = error ? `${id}-error` : undefined;
  return (
    <div className={cn("flex flex-col gap-1", className)}>
      <label htmlFor={id} className="flex min-h-control items-center gap-3 text-15">
        <input
          {...rest}
          id={id}
          type="checkbox"
          aria-describedby={[errorId, hintId].filter(Boolean).join(" ") || undefined}
          aria-invalid={error ? true : undefined}
          className="size-5 shrink-0"
        />
        <span>{label}</span>
      </label>
      {hint && (
        <p id={hintId} className="-mt-2 pl-8 text-13 text-ink2">
          {hint}
        </p>
      )}
      {error && <FieldError id={errorId}>{error}</FieldError>}
    </div>
  );
}
