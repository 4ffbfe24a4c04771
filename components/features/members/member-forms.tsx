"use client";

import { useActionState } from "react";
import { RoleBoxes } from "@/components/features/members/role-boxes";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";
import type { Role } from "@/lib/policy/actor";

interface Answer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}
export type MemberAction = (previous: Answer | null, form: FormData) => Promise<Answer>;

function Outcome({ answer, done }: { answer: Answer | null; done: string }) {
  if (!answer || (answer.fields && !answer.ok)) return null;
  return (
    <Notice tone={answer.ok ? "plain" : "problem"} live>
      {answer.ok ? done : answer.message}
    </Notice>
  );
}

/** Asked for when the sign-in is older than five minutes. */
function Passphrase({ asked }: { asked: boolean }) {
  if (!asked) return null;
  return (
    <TextInput
      label="Your signing passphrase"
      name="passphrase"
      type="password"
      autoComplete="current-password"
      required
      hint="You signed in more than five minutes ago, so say that it is you."
    />
  );
}

/** Invites somebody by mail. */
export function InviteForm({ asksPassphrase, action }: { asksPassphrase: boolean; action: MemberAction }) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <TextInput
        label="E-mail"
        name="email"
        type="email"
        required
        hint="They must sign in with this very address."
        error={answer?.fields?.email?.[0]}
      />
      <RoleBoxes error={answer?.fields?.roles?.[0]} />
      <Passphrase asked={asksPassphrase} />
      <Outcome answer={answer} done="The invitation is on its way. It works once, within seven days." />
      <div>
        <SubmitButton pendingWords="Inviting …">Invite</SubmitButton>
      </div>
    </form>
  );
}

/** Changes the roles of one member. */
export function RolesForm({
  userId,
  roles,
  asksPassphrase,
  blockedBecause,
  action,
}: {
  userId: string;
  roles: readonly Role[];
  asksPassphrase: boolean;
  blockedBecause: string | null;
  action: MemberAction;
}) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-3">
      <input type="hidden" name="userId" value={userId} />
      <RoleBoxes chosen={roles} error={answer?.fields?.roles?.[0]} />
      <Passphrase asked={asksPassphrase && blockedBecause === null} />
      <Outcome answer={answer} done="Saved. It counts from their next request on." />
      <div>
        <SubmitButton look="outlined" pendingWords="Saving …" blockedBecause={blockedBecause}>
          Save roles
        </SubmitButton>
      </div>
    </form>
  );
}

/** Ends one membership. */
export function DisableForm({
  userId,
  name,
  asksPassphrase,
  blockedBecause,
  action,
}: {
  userId: string;
  name: string;
  asksPassphrase: boolean;
  blockedBecause: string | null;
  action: MemberAction;
}) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-3">
      <input type="hidden" name="userId" value={userId} />
      <p className="max-w-prose text-15 text-ink2">
        Ends the membership and every session of {name} at once. What they did keeps their name; the same
        address can not become a member here again.
      </p>
      <Passphrase asked={asksPassphrase && blockedBecause === null} />
      <Outcome answer={answer} done="Disabled." />
      <div>
        <SubmitButton look="outlined" pendingWords="Disabling …" blockedBecause={blockedBecause}>
          Disable {name}
        </SubmitButton>
      </div>
    </form>
  );
}

/** Ends an open invitation. */
export function WithdrawForm({ invitationId, action }: { invitationId: string; action: MemberAction }) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col items-start gap-2">
      <input type="hidden" name="invitationId" value={invitationId} />
      <SubmitButton look="outlined" size="compact">
        Withdraw
      </SubmitButton>
      {answer && !answer.ok && <Outcome answer={answer} done="" />}
    </form>
  );
}

/** Renames the workspace. */
export function RenameWorkspaceForm({
  name,
  blockedBecause,
  action,
}: {
  name: string;
  blockedBecause: string | null;
  action: MemberAction;
}) {
  const [answer, submit] = useActionState(action, null);
  return (
    <form action={submit} className="flex flex-col gap-4">
      <TextInput
        label="Name of the workspace"
        name="name"
        required
        defaultValue={name}
        error={answer?.fields?.name?.[0]}
      />
      <Outcome answer={answer} done="Saved." />
      <div>
        <SubmitButton look="outlined" pendingWords="Saving …" blockedBecause={blockedBecause}>
          Rename
        </SubmitButton>
      </div>
    </form>
  );
}
