"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";

export interface FormAnswer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}

export interface NewWorkspaceFormProps {
  /** The person has no name yet: it is asked for, because it is printed beside what they do. */
  asksName: boolean;
  action: (previous: FormAnswer | null, form: FormData) => Promise<FormAnswer>;
}

export function NewWorkspaceForm({ asksName, action }: NewWorkspaceFormProps) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex max-w-lg flex-col gap-5">
      {asksName && (
        <TextInput
          label="Your name"
          name="yourName"
          required
          autoComplete="name"
          hint="Printed beside everything you do here, also on records."
          error={answer?.fields?.yourName?.[0]}
        />
      )}
      <TextInput
        label="Name of the workspace"
        name="name"
        required
        hint="One workshop, e.g. its trading name."
        error={answer?.fields?.name?.[0]}
      />
      {answer && !answer.ok && !answer.fields && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <div>
        <SubmitButton pendingWords="Making …">Make workspace</SubmitButton>
      </div>
    </form>
  );
}
