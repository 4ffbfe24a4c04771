"use client";
import { type ReactNode, useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}

export interface StepFormProps {
  revisionId: string;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
  button: string;
  look?: "filled" | "outlined";
  /** Why it can't be done now; the button shows it. */
  blockedBecause: string | null;
  /** With a label, a reason is asked for. */
  reasonLabel?: string;
  children?: ReactNode;
}

/** One step of a revision: what it needs, a button, and the server's sentence when it was refused. */
export function StepForm({
  revisionId,
  action,
  button,
  look = "outlined",
  blockedBecause,
  reasonLabel,
  children,
}: StepFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-stretch gap-4">
      <input type="hidden" name="revisionId" value={revisionId} />
      {children}
      {reasonLabel && (
        <Textarea
          label={reasonLabel}
          name="reason"
          required
          hint="It stays in the ledger."
          error={answer?.fields?.reason?.[0]}
        />
      )}
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <div>
        <SubmitButton look={look} blockedBecause={blockedBecause}>
          {button}
        </SubmitButton>
      </div>
    </form>
  );
}
