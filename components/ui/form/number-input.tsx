import type { ComponentProps } from "react";
import { controlBox, Field, type FieldTexts } from "@/components/ui/form/field";
import { cn } from "@/lib/cn";

export interface NumberInputProps
  extends FieldTexts,
    Omit<ComponentProps<"input">, "id" | "required" | "type"> {
  /** Printed inside the box behind the number, e.g. "kg", and read with the label. */
  unit?: string;
  fieldClassName?: string;
}

/**
 * A number with its unit. It stays a text box on purpose: a comma or a point is accepted, the wheel of a mouse
 * changes nothing, and what was typed is never reformatted. The form's schema reads it.
 */
export function NumberInput({
  label,
  hint,
  error,
  required,
  unit,
  className,
  fieldClassName,
  ...rest
}: NumberInputProps) {
  const fullLabel = unit ? (
    <>
      {label}
      <span className="sr-only">, in {unit}</span>
    </>
  ) : (
    label
  );
  return (
    <Field label={fullLabel} hint={hint} error={error} required={required} className={fieldClassName}>
      {(control) => (
        <span className="relative flex">
          <input
            inputMode="decimal"
            autoComplete="off"
            {...rest}
            {...control}
            type="text"
            className={cn(
              controlBox,
              "tabular text-right",
              unit && (unit.length > 6 ? "pr-24" : "pr-16"),
              className,
            )}
          />
          {unit && (
            <span
              aria-hidden
              className={cn(
                "pointer-events-none absolute inset-y-0 right-0 flex items-center whitespace-nowrap pl-1 text-15 text-ink2",
                unit.length > 6 ? "w-22" : "w-14",
              )}
            >
              {unit}
            </span>
          )}
        </span>
      )}
    </Field>
  );
}
