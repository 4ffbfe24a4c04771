"use client";

import { useActionState } from "react";
import type { FormAnswer } from "@/components/features/account/new-workspace-form";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";

export interface AcceptFormProps {
  token: string;
  workspaceName: string;
  asksName: boolean;
  action: (previous: FormAnswer | null, form: FormData) => Promise<FormAnswer>;
}

/** The button that uses an invitation up. */
export function AcceptForm({ token, workspaceName, asksName, action }: AcceptFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <input type="hidden" name="token" value={token} />
      {asksName && (
        <TextInput
          label="Your name"
          name="name"
          required
          autoComplete="name"
          hint="Printed beside everything you do here, also on records."
          error={answer?.fields?.name?.[0]}
        />
      )}
      {answer && !answer.ok && !answer.fields && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <div>
        <SubmitButton pendingWords="Joining …">Join {workspaceName}</SubmitButton>
      </div>
    </form>
  );
}
