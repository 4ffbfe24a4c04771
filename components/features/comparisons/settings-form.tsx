"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Select } from "@/components/ui/form/select";
import { Notice } from "@/components/ui/status/notice";
import { FACTOR_WORDS, RPM_STEPS } from "@/lib/services/comparisons/schema";

/** What a form of this kind answers; a success leads to another page. */
interface Answer {
  ok: boolean;
  message?: string;
}

export interface SettingsFormProps {
  comparisonId: string;
  factor: string;
  rpmStep: number;
  /** Why this person can't change settings; null when they can. */
  blockedBecause: string | null;
  action: (previous: Answer | null, form: FormData) => Promise<Answer>;
}

/** The same two sides under other settings: opens a comparison of its own. */
export function SettingsForm({ comparisonId, factor, rpmStep, blockedBecause, action }: SettingsFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-3">
      <input type="hidden" name="comparisonId" value={comparisonId} />
      <Select
        name="factor"
        label="Weather factor"
        defaultValue={factor}
        options={Object.entries(FACTOR_WORDS).map(([value, label]) => ({ value, label }))}
      />
      <Select
        name="rpmStep"
        label="Grid"
        defaultValue={String(rpmStep)}
        options={RPM_STEPS.map((step) => ({ value: String(step), label: `${step} per minute` }))}
      />
      <p className="text-13 text-ink2">
        Level 95 %, fixed. Other settings open another comparison; bases are never mixed, and gates rest on
        the automatic factor with a grid of 50.
      </p>
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <SubmitButton look="outlined" pendingWords="Opening …" blockedBecause={blockedBecause}>
        Compare under these settings
      </SubmitButton>
    </form>
  );
}
