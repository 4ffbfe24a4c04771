"use client";

import { useFormStatus } from "react-dom";
import { Button, type ButtonProps } from "@/components/ui/action/button";

export interface SubmitButtonProps extends ButtonProps {
  /** Words while the form is on its way, e.g. "Signing …". */
  pendingWords?: string;
}

/** Sends the form around it; while that runs it is busy and can't be pressed twice. */
export function SubmitButton({
  pendingWords = "Sending …",
  children,
  look = "filled",
  ...rest
}: SubmitButtonProps) {
  const { pending } = useFormStatus();
  return (
    <Button
      {...rest}
      look={look}
      type="submit"
      disabled={pending || rest.disabled}
      aria-busy={pending || undefined}
    >
      {pending ? pendingWords : children}
    </Button>
  );
}
