import type { Metadata } from "next";
import {
  changeRolesAction,
  disableMemberAction,
  inviteAction,
  renameWorkspaceAction,
  withdrawInvitationAction,
} from "@/app/(workspace)/members/actions";
import {
  DisableForm,
  InviteForm,
  RenameWorkspaceForm,
  RolesForm,
  WithdrawForm,
} from "@/components/features/members/member-forms";
import { DateTime } from "@/components/ui/data/date-time";
import { Tag } from "@/components/ui/data/tag";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx, requirePerson } from "@/lib/auth/current";
import { RECENT_SIGN_IN_S } from "@/lib/auth/reauthenticate";
import { orRefused } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { listMembers, type MemberLine } from "@/lib/services/members/list";

export const metadata: Metadata = { title: "Members" };

function Member({ member, asksPassphrase }: { member: MemberLine; asksPassphrase: boolean }) {
  const { userId, name, roles, changeBlocked, disableBlocked } = member;
  const manages =
    member.disabledAt === null && (changeBlocked === null || disableBlocked === null || member.isSelf);
  return (
    <li className="flex flex-col gap-1 border-line border-t px-4 py-3 first:border-t-0 md:px-5">
      <div className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1">
        <p className="text-15">
          <strong>{name}</strong>
          {member.isSelf && <span className="text-ink2"> (you)</span>}
          {member.email && member.email !== name && (
            <span className="ml-3 break-all text-13 text-ink2">{member.email}</span>
          )}
        </p>
        <p className="flex flex-wrap gap-1">
          {member.disabledAt ? (
            <span className="text-13 text-ink2">
              disabled since <DateTime at={member.disabledAt} zone="UTC" precision="day" />
            </span>
          ) : (
            roles.map((role) => <Tag key={role}>{role}</Tag>)
          )}
        </p>
      </div>
      {manages && (
        <Disclosure summary="Change">
          <div className="grid gap-6 md:grid-cols-2">
            <RolesForm
              key={roles.join()}
              userId={userId}
              roles={roles}
              asksPassphrase={asksPassphrase}
              blockedBecause={changeBlocked}
              action={changeRolesAction}
            />
            <DisableForm
              userId={userId}
              name={name}
              asksPassphrase={asksPassphrase}
              blockedBecause={disableBlocked}
              action={disableMemberAction}
            />
          </div>
        </Disclosure>
      )}
    </li>
  );
}

export default async function MembersPage() {
  const ctx = await requireCtx();
  const person = await requirePerson();
  const { members, invitations, inviteBlocked } = await orRefused(() => listMembers(ctx));
  const workspace = person.memberships.find((membership) => membership.workspaceId === ctx.workspaceId);
  const asksPassphrase = person.sessionAgeS > RECENT_SIGN_IN_S;
  const rename = can(ctx, "workspace.update");
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        title="Members"
        lead={`Who belongs to ${workspace?.workspaceName ?? "this workspace"}, and what each may do.`}
      />
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,1fr)_22rem]">
        <Card flush>
          <ul>
            {members.map((member) => (
              <Member key={member.userId} member={member} asksPassphrase={asksPassphrase} />
            ))}
          </ul>
        </Card>
        <div className="flex flex-col gap-6">
          <Card title="Invite">
            {inviteBlocked ? (
              <p className="text-15 text-ink2">{inviteBlocked}</p>
            ) : (
              <InviteForm asksPassphrase={asksPassphrase} action={inviteAction} />
            )}
          </Card>
          {invitations.length > 0 && (
            <Card title="Open invitations">
              <ul className="flex flex-col gap-4">
                {invitations.map((invitation) => (
                  <li key={invitation.id} className="flex flex-col gap-1">
                    <p className="break-all text-15">{invitation.email}</p>
                    <p className="text-13 text-ink2">
                      {invitation.roles.join(", ")}, until <DateTime at={invitation.expiresAt} zone="UTC" />
                    </p>
                    <WithdrawForm invitationId={invitation.id} action={withdrawInvitationAction} />
                  </li>
                ))}
              </ul>
            </Card>
          )}
          {rename.ok && (
            <Card title="Workspace">
              <RenameWorkspaceForm
                name={workspace?.workspaceName ?? ""}
                blockedBecause={null}
                action={renameWorkspaceAction}
              />
            </Card>
          )}
        </div>
      </div>
    </div>
  );
}
