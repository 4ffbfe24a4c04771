"use client";

import { useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";

export interface SignInAnswer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}

export type SignInAction = (previous: SignInAnswer | null, form: FormData) => Promise<SignInAnswer>;

/** Asks for an address and has a link mailed to it. `next` is where to go after signing in. */
export function SignInForm({ next, action }: { next: string; action: SignInAction }) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <input type="hidden" name="next" value={next} />
      <TextInput
        label="E-mail"
        name="email"
        type="email"
        inputMode="email"
        autoComplete="email"
        required
        error={answer?.fields?.email?.[0]}
      />
      {answer && !answer.ok && !answer.fields && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
      <SubmitButton pendingWords="Mailing …" className="w-full">
        Mail me a sign-in link
      </SubmitButton>
    </form>
  );
}
