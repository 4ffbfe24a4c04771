import { updateRoles } from "@/db/queries/members";
import { confirmIdentity, type Proof } from "@/lib/auth/reauthenticate";
import { ConflictError } from "@/lib/errors";
import type { Role } from "@/lib/policy/actor";
import { whyNotChangeRoles } from "@/lib/policy/member-rules";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { lockMember } from "@/lib/services/members/load";
import { changeRolesSchema } from "@/lib/services/members/schema";

/** Changes what a member may do, from their next request on. @throws ForbiddenError, NotFoundError, ConflictError */
export async function changeRoles(
  ctx: Ctx,
  input: { userId: string; roles: Role[] },
  proof: Proof,
): Promise<void> {
  authorise(ctx, "member.change_role");
  const { userId, roles } = changeRolesSchema.parse(input);
  await confirmIdentity(ctx, proof);
  await withTransaction(ctx, async (tx, inner) => {
    const member = await lockMember(tx, inner, "member.change_role", userId);
    const { otherAdmins } = member;
    const question = { actorId: ctx.userId, targetId: userId, targetRoles: member.roles, otherAdmins };
    const reason = whyNotChangeRoles({ ...question, to: roles });
    if (reason) throw new ConflictError("roles_kept", reason);
    await updateRoles(tx, { workspaceId: ctx.workspaceId, userId, roles });
    await appendLedger(tx, inner, {
      event: "member.role_changed",
      subjectType: "member",
      subjectId: userId,
      data: { name: member.name, old: { roles: member.roles }, new: { roles } },
    });
  });
}
