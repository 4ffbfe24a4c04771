import type { ComponentProps } from "react";
import { controlBox, Field, type FieldTexts } from "@/components/ui/form/field";
import { cn } from "@/lib/cn";

export interface TextareaProps extends FieldTexts, Omit<ComponentProps<"textarea">, "id" | "required"> {
  fieldClassName?: string;
}

/** Several lines of text; grows with what is written where the browser can. */
export function Textarea({
  label,
  hint,
  error,
  required,
  className,
  fieldClassName,
  rows = 3,
  ...rest
}: TextareaProps) {
  return (
    <Field label={label} hint={hint} error={error} required={required} className={fieldClassName}>
      {(control) => (
        <textarea
          rows={rows}
          {...rest}
          {...control}
          className={cn(controlBox, "field-sizing-content min-h-20 resize-y", className)}
        />
      )}
    </Field>
  );
}
