import type { Metadata } from "next";
import { renamePersonAction, setPassphraseAction } from "@/app/(workspace)/account/actions";
import { NameForm, PassphraseForm } from "@/components/features/account/account-forms";
import { LinkButton } from "@/components/ui/action/link-button";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requirePerson } from "@/lib/auth/current";
import { RECENT_SIGN_IN_S } from "@/lib/auth/reauthenticate";
import { database } from "@/lib/runtime";
import { personHasPassphrase } from "@/lib/services/account/set-passphrase";

export const metadata: Metadata = { title: "Account" };

export default async function AccountPage() {
  const person = await requirePerson();
  const isSet = await personHasPassphrase(database(), person.id);
  const isOld = person.sessionAgeS > RECENT_SIGN_IN_S;
  const blocked =
    isOld && !isSet
      ? "You signed in more than five minutes ago. Sign out, sign in again, then set it within five minutes."
      : null;
  return (
    <div className="flex flex-col gap-8">
      <PageHeading title="Account" lead={`Signed in as ${person.email}.`} />
      <div className="grid items-start gap-6 lg:grid-cols-2">
        <Card title="Name">
          <NameForm key={person.name} name={person.hasName ? person.name : ""} action={renamePersonAction} />
        </Card>
        <Card
          title="Signing passphrase"
          description={
            isSet
              ? "It is set. It signs your decisions; nobody else can set or read it. Five wrong tries lock it for 15 minutes."
              : "Not set yet. It signs your decisions; nobody else can set or read it."
          }
        >
          <PassphraseForm
            isSet={isSet}
            asksOld={isOld}
            blockedBecause={blocked}
            action={setPassphraseAction}
          />
        </Card>
        <Card title="Workspaces">
          <DescriptionList
            items={person.memberships.map((membership) => ({
              term: membership.workspaceName,
              description: membership.roles.join(", "),
            }))}
          />
          {person.memberships.length === 0 && <p className="text-15 text-ink2">You belong to none yet.</p>}
          <LinkButton href="/workspaces/new" className="mt-4">
            New workspace
          </LinkButton>
        </Card>
      </div>
    </div>
  );
}
