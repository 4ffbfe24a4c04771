import type { Queryable } from "@/db/client";
import {
  insertMembership,
  lockWorkspace,
  markInvitationAccepted,
  selectInvitation,
  selectMember,
} from "@/db/queries/members";
import { selectUser, updateUserName } from "@/db/queries/people";
import { ConflictError, ForbiddenError, NotFoundError } from "@/lib/errors";
import { type Asker, inWorkspace } from "@/lib/services/asker";
import { appendLedger } from "@/lib/services/ledger/append";
import { hashInvitationToken } from "@/lib/services/members/invite";

/** The open invitation behind a link, for the page with the button; null when used, ended or unknown. */
export async function findInvitation(db: Queryable, token: string) {
  return await selectInvitation(db, { tokenSha256: hashInvitationToken(token) });
}

/**
 * Joins a workspace by an invitation, which is then used up.
 * @param name the person's own name where they have none yet
 * @throws NotFoundError used, ended or unknown; ForbiddenError signed in with another address; ConflictError member already
 */
export async function acceptInvitation(
  asker: Asker,
  { token, name }: { token: string; name?: string },
): Promise<{ workspaceId: string }> {
  const { userId } = asker;
  return await asker.db.transaction(async (tx) => {
    const tokenSha256 = hashInvitationToken(token);
    const found = await selectInvitation(tx, { tokenSha256 });
    // The workspace's row before the invitation, as whoever invites takes them.
    if (found) await lockWorkspace(tx, { workspaceId: found.workspaceId });
    const invitation = await selectInvitation(tx, { tokenSha256, lock: true });
    if (!invitation)
      throw new NotFoundError(
        "invitation_not_found",
        "This invitation was used already, has ended, or never was. Ask for a new one.",
      );
    const person = await selectUser(tx, { userId });
    if (person?.email.toLowerCase() !== invitation.email)
      throw new ForbiddenError(
        "other_address",
        "This invitation was sent to another address. Sign out and sign in with the address that it was sent to.",
      );
    const { workspaceId, roles } = invitation;
    if (await selectMember(tx, { workspaceId, userId }))
      throw new ConflictError("is_member", "You belong to this workspace already.");
    const userName = person.name ?? name ?? asker.userName;
    if (!person.name && name) await updateUserName(tx, { userId, name });
    await insertMembership(tx, { workspaceId, userId, roles });
    await markInvitationAccepted(tx, { id: invitation.id });
    await appendLedger(tx, inWorkspace({ ...asker, userName }, tx, { workspaceId, roles }), {
      event: "member.joined",
      subjectType: "member",
      subjectId: userId,
      data: { name: userName, roles, invitationId: invitation.id },
    });
    return { workspaceId };
  });
}
