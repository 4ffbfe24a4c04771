"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Checkbox } from "@/components/ui/form/checkbox";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
}

export interface ChecklistLine {
  item: string;
  text: string;
  confirmed: boolean;
  /** E.g. "confirmed by Sam, 14:32". */
  by: string | null;
}

export interface ChecklistFormProps {
  roadDayId: string;
  lines: readonly ChecklistLine[];
  /** Why this person can't confirm; null when they can. */
  blockedBecause: string | null;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
}

/** The safety checklist, confirmed line by line while the car is parked. */
export function ChecklistForm({ roadDayId, lines, blockedBecause, action }: ChecklistFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-3">
      <input type="hidden" name="roadDayId" value={roadDayId} />
      <ul className="flex flex-col gap-1">
        {lines.map((line) => (
          <li key={line.item}>
            <Checkbox
              name="confirmed"
              value={line.item}
              label={line.text}
              hint={line.by}
              defaultChecked={line.confirmed}
              disabled={blockedBecause !== null}
            />
          </li>
        ))}
      </ul>
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <div>
        <SubmitButton
          size="roadside"
          look={lines.every((line) => line.confirmed) ? "outlined" : "filled"}
          pendingWords="Writing it down …"
          blockedBecause={blockedBecause}
        >
          Confirm what is ticked
        </SubmitButton>
      </div>
    </form>
  );
}
