"use client";
import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
}

export interface CompareFormProps {
  a: { id: string; number: number };
  b: { id: string; number: number };
  blockedBecause: string | null;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
}

/** Opens the comparison of two revisions: side A is the reference. */
export function CompareForm({ a, b, blockedBecause, action }: CompareFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-start gap-2">
      <input type="hidden" name="revisionAId" value={a.id} />
      <input type="hidden" name="revisionBId" value={b.id} />
      <SubmitButton look="outlined" pendingWords="Opening …" blockedBecause={blockedBecause}>
        Compare with R{a.number}
      </SubmitButton>
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
    </form>
  );
}
