import type { ComponentProps } from "react";
import { controlBox, Field, type FieldTexts } from "@/components/ui/form/field";
import { cn } from "@/lib/cn";

export interface TextInputProps extends FieldTexts, Omit<ComponentProps<"input">, "id" | "required"> {
  /** Numbers, fingerprints and codes read better in the numeral face. */
  mono?: boolean;
  fieldClassName?: string;
}

/** A line of text with its label, hint and error. */
export function TextInput({
  label,
  hint,
  error,
  required,
  mono,
  className,
  fieldClassName,
  ...rest
}: TextInputProps) {
  return (
    <Field label={label} hint={hint} error={error} required={required} className={fieldClassName}>
      {(control) => (
        <input type="text" {...rest} {...control} className={cn(controlBox, mono && "tabular", className)} />
      )}
    </Field>
  );
}
