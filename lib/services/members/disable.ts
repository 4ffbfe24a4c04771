import { disableMembership } from "@/db/queries/members";
import { deleteSessions } from "@/db/queries/people";
import { confirmIdentity, type Proof } from "@/lib/auth/reauthenticate";
import { ConflictError } from "@/lib/errors";
import { whyNotDisable } from "@/lib/policy/member-rules";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { lockMember } from "@/lib/services/members/load";
import { disableMemberSchema } from "@/lib/services/members/schema";

/**
 * Ends a membership and every session of that person at once. The row stays: what they did keeps their name.
 * @throws ForbiddenError, NotFoundError, ConflictError
 */
export async function disableMember(ctx: Ctx, input: { userId: string }, proof: Proof): Promise<void> {
  authorise(ctx, "member.disable");
  const { userId } = disableMemberSchema.parse(input);
  await confirmIdentity(ctx, proof);
  await withTransaction(ctx, async (tx, inner) => {
    const member = await lockMember(tx, inner, "member.disable", userId);
    const { roles: targetRoles, otherAdmins } = member;
    const reason = whyNotDisable({ actorId: ctx.userId, targetId: userId, targetRoles, otherAdmins });
    if (reason) throw new ConflictError("member_kept", reason);
    await disableMembership(tx, { workspaceId: ctx.workspaceId, userId });
    await deleteSessions(tx, { userId });
    await appendLedger(tx, inner, {
      event: "member.disabled",
      subjectType: "member",
      subjectId: userId,
      data: { name: member.name, roles: targetRoles },
    });
  });
}
