import { ChevronDown } from "lucide-react";
import type { ComponentProps } from "react";
import { controlBox, Field, type FieldTexts } from "@/components/ui/form/field";
import { cn } from "@/lib/cn";

export interface SelectOption {
  value: string;
  label: string;
  disabled?: boolean;
}

export interface SelectProps extends FieldTexts, Omit<ComponentProps<"select">, "id" | "required"> {
  options: readonly SelectOption[];
  /** First entry with an empty value, e.g. "Choose a strip". */
  emptyLabel?: string;
  fieldClassName?: string;
}

/** One of many, in the platform's own list: works on every phone, with gloves and without script. */
export function Select({
  label,
  hint,
  error,
  required,
  options,
  emptyLabel,
  className,
  fieldClassName,
  ...rest
}: SelectProps) {
  return (
    <Field label={label} hint={hint} error={error} required={required} className={fieldClassName}>
      {(control) => (
        <span className="relative flex">
          <select {...rest} {...control} className={cn(controlBox, "appearance-none pr-10", className)}>
            {emptyLabel !== undefined && <option value="">{emptyLabel}</option>}
            {options.map((option) => (
              <option key={option.value} value={option.value} disabled={option.disabled}>
                {option.label}
              </option>
            ))}
          </select>
          <ChevronDown
            aria-hidden
            size={18}
            className="pointer-events-none absolute inset-y-0 right-3 my-auto text-ink2"
          />
        </span>
      )}
    </Field>
  );
}
