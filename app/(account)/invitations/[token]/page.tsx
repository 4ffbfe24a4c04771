import type { Metadata, Route } from "next";
import Link from "next/link";
import { acceptInvitationAction } from "@/app/(account)/invitations/actions";
import { AcceptForm } from "@/components/features/account/accept-form";
import { LinkButton } from "@/components/ui/action/link-button";
import { DateTime } from "@/components/ui/data/date-time";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { currentPerson } from "@/lib/auth/current";
import { database } from "@/lib/runtime";
import { findInvitation } from "@/lib/services/members/accept";

export const metadata: Metadata = { title: "Invitation", referrer: "no-referrer" };

/** Where an invitation's link leads: it says what it is for, and its button uses it up. */
export default async function InvitationPage({ params }: PageProps<"/invitations/[token]">) {
  const { token } = await params;
  const [invitation, person] = [await findInvitation(database(), token), await currentPerson()];
  if (!invitation) {
    return (
      <div className="flex max-w-prose flex-col gap-6 py-8">
        <PageHeading
          title="This invitation is no longer open"
          lead="It was used already, is older than seven days, was withdrawn, or its link is not complete. Ask for a new one."
        />
        <p>
          <Link href="/programmes" className="link">
            To the programmes
          </Link>
        </p>
      </div>
    );
  }
  const isForPerson = person?.email.toLowerCase() === invitation.email;
  return (
    <div className="flex max-w-prose flex-col gap-6 py-8">
      <PageHeading
        title={`Join ${invitation.workspaceName}`}
        lead={
          <>
            {invitation.invitedByName ?? "An admin"} invites {invitation.email} as{" "}
            {invitation.roles.join(", ")}. Open until <DateTime at={invitation.expiresAt} zone="UTC" />.
          </>
        }
      />
      {!person && (
        <>
          <Notice>Sign in with that address first; you come back here afterwards.</Notice>
          <LinkButton
            look="filled"
            href={`/sign-in?next=/invitations/${token}` as Route}
            className="self-start"
          >
            Sign in
          </LinkButton>
        </>
      )}
      {person && !isForPerson && (
        <Notice tone="caution" title="You are signed in with another address">
          You are {person.email}. Sign out, then sign in as {invitation.email} and open this link again.
        </Notice>
      )}
      {person && isForPerson && (
        <AcceptForm
          token={token}
          workspaceName={invitation.workspaceName}
          asksName={!person.hasName}
          action={acceptInvitationAction}
        />
      )}
    </div>
  );
}
