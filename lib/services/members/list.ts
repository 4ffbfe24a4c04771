import { selectMembers, selectOpenInvitations } from "@/db/queries/members";
import type { Role } from "@/lib/policy/actor";
import { can, isMasked } from "@/lib/policy/can";
import { whyNotChangeRoles, whyNotDisable } from "@/lib/policy/member-rules";
import { authorise, type Ctx } from "@/lib/services/ctx";

export interface MemberLine {
  userId: string;
  name: string;
  /** Null for readers, who see names only. */
  email: string | null;
  roles: Role[];
  isSelf: boolean;
  disabledAt: Date | null;
  /** Why the asker can't, or null. */
  changeBlocked: string | null;
  disableBlocked: string | null;
}

/** Members, and the open invitations for those who may invite. Readers see the names of active members only. */
export async function listMembers(ctx: Ctx) {
  authorise(ctx, "member.list");
  const { workspaceId } = ctx;
  const masked = isMasked(ctx, "member.list");
  const rows = await selectMembers(ctx.db, { workspaceId });
  const isAdmin = (row: (typeof rows)[number]) => row.disabledAt === null && row.roles.includes("admin");
  const lines = rows.map((row): MemberLine => {
    const otherAdmins = rows.filter((other) => other.userId !== row.userId && isAdmin(other)).length;
    const question = { actorId: ctx.userId, targetId: row.userId, targetRoles: row.roles, otherAdmins };
    const change = can(ctx, "member.change_role");
    const disable = can(ctx, "member.disable");
    return {
      userId: row.userId,
      name: row.name ?? (masked ? "somebody without a name" : row.email),
      email: masked ? null : row.email,
      roles: masked ? [] : row.roles,
      isSelf: row.userId === ctx.userId,
      disabledAt: row.disabledAt,
      changeBlocked: change.ok ? whyNotChangeRoles(question) : change.reason,
      disableBlocked: disable.ok ? whyNotDisable(question) : disable.reason,
    };
  });
  const invite = can(ctx, "member.invite");
  return {
    masked,
    members: masked ? lines.filter((line) => line.disabledAt === null) : lines,
    invitations: invite.ok ? await selectOpenInvitations(ctx.db, { workspaceId }) : [],
    inviteBlocked: invite.ok ? null : invite.reason,
  };
}
