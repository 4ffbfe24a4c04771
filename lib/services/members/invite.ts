import { createHash, randomBytes } from "node:crypto";
import { enqueueMail } from "@/db/queries/mail";
import { endInvitations, insertInvitation, lockWorkspace, selectMemberByEmail } from "@/db/queries/members";
import { selectWorkspace } from "@/db/queries/workspaces";
import { confirmIdentity, type Proof } from "@/lib/auth/reauthenticate";
import { ConflictError, NotFoundError } from "@/lib/errors";
import type { Role } from "@/lib/policy/actor";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { limitTries } from "@/lib/services/limit-tries";
import { inviteSchema } from "@/lib/services/members/schema";

/** As long as the invitation itself is good: seven days. */
const INVITATION_S = 7 * 24 * 60 * 60;

/** What is kept of an invitation's token: the table opens no door. */
export function hashInvitationToken(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}

function letter(workspace: string, inviter: string, roles: Role[], link: string): string {
  return [
    `${inviter} invites you to the workspace ${workspace} in Twinpass, as ${roles.join(", ")}.`,
    "",
    "Open this link, sign in with this very address and press the button there:",
    "",
    link,
    "",
    "It works once, within seven days. If you do not know what this is about, do nothing.",
  ].join("\n");
}

/**
 * Invites somebody by mail; an earlier open invitation of the same address ends.
 * @param origin public address of the product, for the link
 * @throws ForbiddenError; ConflictError for an address that is or was a member here; TooManyRequestsError after 30 an hour
 */
export async function inviteMember(
  ctx: Ctx,
  input: { email: string; roles: Role[] },
  proof: Proof,
  origin: string,
): Promise<{ invitationId: string }> {
  authorise(ctx, "member.invite");
  const { email, roles } = inviteSchema.parse(input);
  await confirmIdentity(ctx, proof);
  await limitTries(ctx.db, { doing: "send invitations", userId: ctx.userId });
  const { workspaceId } = ctx;
  const token = randomBytes(32).toString("base64url");
  return await withTransaction(ctx, async (tx, inner) => {
    await lockWorkspace(tx, { workspaceId });
    const workspace = await selectWorkspace(tx, { workspaceId });
    if (!workspace) throw new NotFoundError("workspace_not_found", "There is no such workspace.");
    const member = await selectMemberByEmail(tx, { workspaceId, email });
    if (member?.disabledAt)
      throw new ConflictError(
        "was_member",
        "This address was a member here and was disabled; a membership is never used again. Invite another address.",
      );
    if (member) throw new ConflictError("is_member", "This address belongs to a member already.");
    await endInvitations(tx, { workspaceId, email });
    const tokenSha256 = hashInvitationToken(token);
    const made = await insertInvitation(tx, {
      workspaceId,
      email,
      roles,
      tokenSha256,
      invitedBy: ctx.userId,
    });
    const link = new URL(`/invitations/${token}`, origin).toString();
    await enqueueMail(tx, {
      workspaceId,
      toAddress: email,
      usefulForS: INVITATION_S,
      subject: `Invitation to ${workspace.name} in Twinpass`,
      body: letter(workspace.name, ctx.userName, roles, link),
    });
    await appendLedger(tx, inner, {
      event: "member.invited",
      subjectType: "member",
      subjectId: null,
      data: { invitationId: made.id, roles },
    });
    return { invitationId: made.id };
  });
}

/** Ends an open invitation. @throws ForbiddenError, NotFoundError */
export async function withdrawInvitation(ctx: Ctx, invitationId: string): Promise<void> {
  authorise(ctx, "member.invite");
  await withTransaction(ctx, async (tx, inner) => {
    const ended = await endInvitations(tx, { workspaceId: ctx.workspaceId, invitationId });
    if (ended.length === 0)
      throw new NotFoundError("invitation_not_found", "This invitation is no longer open.");
    await appendLedger(tx, inner, {
      event: "member.invitation_withdrawn",
      subjectType: "member",
      subjectId: null,
      data: { invitationId },
    });
  });
}
