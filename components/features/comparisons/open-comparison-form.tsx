"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
}

export interface OpenComparisonFormProps {
  revisionAId: string;
  revisionBId: string;
  label: string;
  blockedBecause: string | null;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
}

/** One button that opens the comparison of two revisions and goes there. */
export function OpenComparisonForm({
  revisionAId,
  revisionBId,
  label,
  blockedBecause,
  action,
}: OpenComparisonFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-start gap-2">
      <input type="hidden" name="revisionAId" value={revisionAId} />
      <input type="hidden" name="revisionBId" value={revisionBId} />
      <SubmitButton look="outlined" pendingWords="Opening …" blockedBecause={blockedBecause}>
        {label}
      </SubmitButton>
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
    </form>
  );
}
