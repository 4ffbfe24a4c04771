"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
}

export type AskAction = (previous: Answer | null, form: FormData) => Promise<Answer>;

export interface AskFormProps {
  revisionId: string;
  againstId: string;
  label: string;
  blockedBecause: string | null;
  action: AskAction;
}

/** One button that has two revisions set against each other. */
export function AskForm({ revisionId, againstId, label, blockedBecause, action }: AskFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-start gap-2">
      <input type="hidden" name="revisionId" value={revisionId} />
      <input type="hidden" name="againstId" value={againstId} />
      <SubmitButton look="outlined" pendingWords="Asking …" blockedBecause={blockedBecause}>
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
