"use client";

import { type ReactNode, useActionState } from "react";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}
export type ManageAction = (previous: Answer | null, form: FormData) => Promise<Answer>;

function Outcome({ answer, done }: { answer: Answer | null; done: string }) {
  if (!answer || (answer.fields && !answer.ok)) return null;
  return (
    <Notice tone={answer.ok ? "plain" : "problem"} live>
      {answer.ok ? done : answer.message}
    </Notice>
  );
}

/** Name and goal; refused where somebody else changed them meanwhile. */
export function EditProgrammeForm({
  programme,
  blockedBecause,
  action,
}: {
  programme: { id: string; rowVersion: number; name: string; goal: string };
  blockedBecause: string | null;
  action: ManageAction;
}) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <input type="hidden" name="programmeId" value={programme.id} />
      <input type="hidden" name="rowVersion" value={programme.rowVersion} />
      <TextInput
        label="Name"
        name="name"
        required
        defaultValue={programme.name}
        error={answer?.fields?.name?.[0]}
      />
      <Textarea
        label="Goal"
        name="goal"
        rows={2}
        defaultValue={programme.goal}
        error={answer?.fields?.goal?.[0]}
      />
      <Outcome answer={answer} done="Saved." />
      <div>
        <SubmitButton look="outlined" pendingWords="Saving …" blockedBecause={blockedBecause}>
          Save name and goal
        </SubmitButton>
      </div>
    </form>
  );
}

/** A button with hidden fields: archive, take out again, end a share. */
export function OneButtonForm({
  fields,
  label,
  blockedBecause = null,
  action,
  children,
}: {
  fields: Record<string, string>;
  label: string;
  blockedBecause?: string | null;
  action: ManageAction;
  children?: ReactNode;
}) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-start gap-2">
      {Object.entries(fields).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      {children}
      <SubmitButton look="outlined" size="compact" blockedBecause={blockedBecause}>
        {label}
      </SubmitButton>
      {answer && !answer.ok && <Outcome answer={answer} done="" />}
    </form>
  );
}

/** Shows the released revisions to a reader until a day. */
export function ShareForm({
  programmeId,
  readers,
  action,
}: {
  programmeId: string;
  readers: readonly { userId: string; name: string }[];
  action: ManageAction;
}) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <input type="hidden" name="programmeId" value={programmeId} />
      <div className="grid gap-4 sm:grid-cols-2">
        <Select
          label="Reader"
          name="userId"
          required
          emptyLabel="Choose a reader"
          options={readers.map(({ userId, name }) => ({ value: userId, label: name }))}
          error={answer?.fields?.userId?.[0]}
        />
        <TextInput
          label="Last day"
          name="expiresOn"
          type="date"
          required
          error={answer?.fields?.expiresOn?.[0]}
        />
      </div>
      <Outcome answer={answer} done="Shared." />
      <div>
        <SubmitButton look="outlined" pendingWords="Sharing …">
          Share
        </SubmitButton>
      </div>
    </form>
  );
}
