"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
}

export interface RecomputeFormProps {
  comparisonId: string;
  blockedBecause: string | null;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
}

/** Has the comparison computed for what counts now. */
export function RecomputeForm({ comparisonId, blockedBecause, action }: RecomputeFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-start gap-2">
      <input type="hidden" name="comparisonId" value={comparisonId} />
      <SubmitButton pendingWords="Asking …" blockedBecause={blockedBecause}>
        Recompute
      </SubmitButton>
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
    </form>
  );
}
