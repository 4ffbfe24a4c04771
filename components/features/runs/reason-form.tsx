"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}

export interface ReasonFormProps {
  runId: string;
  rowVersion: number;
  /** Which field is sent: a reason that stays on the record, or the run's note. */
  field: "reason" | "note";
  label: string;
  hint: string;
  initial?: string;
  submitWords: string;
  /** Why this can't be done now; null when it can. */
  blockedBecause: string | null;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
}

/** One text and one button about one run. */
export function ReasonForm(props: ReasonFormProps) {
  const { runId, rowVersion, field, label, hint, initial, submitWords, blockedBecause, action } = props;
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-3">
      <input type="hidden" name="runId" value={runId} />
      <input type="hidden" name="rowVersion" value={rowVersion} />
      <Textarea
        name={field}
        label={label}
        hint={hint}
        defaultValue={initial}
        required={field === "reason"}
        error={answer?.fields?.[field]?.[0]}
        rows={2}
      />
      {answer && !answer.ok && !answer.fields?.[field] && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <div>
        <SubmitButton look="outlined" pendingWords="Writing it down …" blockedBecause={blockedBecause}>
          {submitWords}
        </SubmitButton>
      </div>
    </form>
  );
}
