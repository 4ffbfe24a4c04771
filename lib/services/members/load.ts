import type { Transaction } from "@/db/client";
import { lockWorkspace, selectMember } from "@/db/queries/members";
import { countOthersWithRole, selectRoles } from "@/db/queries/people";
import { ConflictError, NotFoundError } from "@/lib/errors";
import type { Action } from "@/lib/policy/rules";
import { authorise, type Ctx } from "@/lib/services/ctx";

/**
 * A member under the workspace's lock, after asking the policy again with the roles that the actor holds now:
 * of two admins who change each other at once, the second is refused.
 * @throws NotFoundError, ConflictError for a disabled member, ForbiddenError
 */
export async function lockMember(tx: Transaction, ctx: Ctx, action: Action, userId: string) {
  const { workspaceId } = ctx;
  await lockWorkspace(tx, { workspaceId });
  const roles = (await selectRoles(tx, { workspaceId, userId: ctx.userId })) ?? [];
  authorise({ ...ctx, roles }, action);
  const member = await selectMember(tx, { workspaceId, userId });
  if (!member) throw new NotFoundError("member_not_found", "There is no such member here.");
  if (member.disabledAt)
    throw new ConflictError("member_disabled", `${member.name ?? "This member"} is disabled already.`);
  const otherAdmins = await countOthersWithRole(tx, { workspaceId, userId, role: "admin" });
  return { name: member.name, roles: member.roles, otherAdmins };
}
