"use client";

import { useActionState } from "react";
import type { FormAnswer } from "@/components/features/account/new-workspace-form";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";

type AccountAction = (previous: FormAnswer | null, form: FormData) => Promise<FormAnswer>;

function Outcome({ answer, done }: { answer: FormAnswer | null; done: string }) {
  if (!answer || (answer.fields && !answer.ok)) return null;
  return (
    <Notice tone={answer.ok ? "plain" : "problem"} live>
      {answer.ok ? done : answer.message}
    </Notice>
  );
}

/** The person's own name. */
export function NameForm({ name, action }: { name: string; action: AccountAction }) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <TextInput
        label="Name"
        name="name"
        required
        autoComplete="name"
        defaultValue={name}
        hint="Printed beside what you do from now on. What you did keeps the name of its day."
        error={answer?.fields?.name?.[0]}
      />
      <Outcome answer={answer} done="Saved." />
      <div>
        <SubmitButton look="outlined" pendingWords="Saving …">
          Save name
        </SubmitButton>
      </div>
    </form>
  );
}

export interface PassphraseFormProps {
  isSet: boolean;
  /** The sign-in is older than five minutes: the old passphrase is asked for. */
  asksOld: boolean;
  /** Why it can't be set now, or null. */
  blockedBecause: string | null;
  action: AccountAction;
}

/** The passphrase that signs decisions; the second thing beside the session. */
export function PassphraseForm({ isSet, asksOld, blockedBecause, action }: PassphraseFormProps) {
  const [answer, submit] = useActionState(action, null);
  const errors = answer?.fields;
  return (
    <form action={submit} className="flex flex-col gap-4">
      {asksOld && isSet && (
        <TextInput
          label="Passphrase now in force"
          name="old"
          type="password"
          autoComplete="current-password"
          required
          error={errors?.old?.[0]}
        />
      )}
      <TextInput
        label={isSet ? "New passphrase" : "Passphrase"}
        name="fresh"
        type="password"
        autoComplete="new-password"
        required
        minLength={12}
        hint="At least 12 characters; four unrelated words do well."
        error={errors?.fresh?.[0]}
      />
      <TextInput
        label="The same again"
        name="again"
        type="password"
        autoComplete="new-password"
        required
        error={errors?.again?.[0]}
      />
      <Outcome answer={answer} done="Your passphrase is set. A letter tells you so too." />
      <div>
        <SubmitButton pendingWords="Setting …" blockedBecause={blockedBecause}>
          {isSet ? "Change passphrase" : "Set passphrase"}
        </SubmitButton>
      </div>
    </form>
  );
}
