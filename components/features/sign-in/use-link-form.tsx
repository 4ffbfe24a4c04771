"use client";

import Link from "next/link";
import { useActionState } from "react";
import type { SignInAction } from "@/components/features/sign-in/sign-in-form";
import { SubmitButton } from "@/components/ui/action/submit-button";
import { Notice } from "@/components/ui/status/notice";

/** The button that uses a link up. Opening the page did not: mail scanners open links too. */
export function UseLinkForm({
  email,
  token,
  action,
}: {
  email: string;
  token: string;
  action: SignInAction;
}) {
  const [answer, submit] = useActionState(action, null);
  if (answer && !answer.ok) {
    return (
      <Notice
        tone="problem"
        live
        title="Nobody was signed in"
        actions={
          <Link href="/sign-in" className="link">
            Ask for a new link
          </Link>
        }
      >
        {answer.message}
      </Notice>
    );
  }
  return (
    <form action={submit}>
      <input type="hidden" name="email" value={email} />
      <input type="hidden" name="token" value={token} />
      <SubmitButton pendingWords="Signing in …">Sign in as {email}</SubmitButton>
    </form>
  );
}
