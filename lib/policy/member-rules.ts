import type { Role } from "@/lib/policy/actor";

interface Question {
  actorId: string;
  targetId: string;
  targetRoles: readonly Role[];
  /** Active admins of the workspace other than the target. */
  otherAdmins: number;
}

/** Why roles can't be changed to these, or null. Without `to`: why they can't be changed at all. */
export function whyNotChangeRoles({
  actorId,
  targetId,
  targetRoles,
  otherAdmins,
  to,
}: Question & { to?: readonly Role[] }): string | null {
  if (actorId === targetId && otherAdmins > 0)
    return "Nobody changes their own roles: another admin does it.";
  const losesAdmin = targetRoles.includes("admin") && to !== undefined && !to.includes("admin");
  if (losesAdmin && otherAdmins === 0) return "The last admin stays admin. Make somebody else admin first.";
  return null;
}

/** Why a member can't be disabled, or null. */
export function whyNotDisable({ actorId, targetId, targetRoles, otherAdmins }: Question): string | null {
  if (targetRoles.includes("admin") && otherAdmins === 0)
    return "The last admin can't be disabled. Make somebody else admin first.";
  if (actorId === targetId) return "Nobody disables themselves: another admin does it.";
  return null;
}
