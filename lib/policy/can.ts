import { type Actor, type Facts, ROLES, type Role, type Verdict } from "@/lib/policy/actor";
import { type Action, type Cell, RULES, type Rule } from "@/lib/policy/rules";

function listRoles(roles: Role[]): string {
  return roles.length < 2 ? (roles[0] ?? "nobody") : `${roles.slice(0, -1).join(", ")} or ${roles.at(-1)}`;
}

function judge(cell: Cell, actor: Actor, facts: Facts, doing: string): Verdict {
  switch (cell) {
    case "allow":
    case "masked":
      return { ok: true };
    case "own":
      return facts.ownerId === undefined || facts.ownerId === actor.userId
        ? { ok: true }
        : { ok: false, reason: `You can't ${doing}: only the person who made it can.` };
    case "granted":
      return facts.granted
        ? { ok: true }
        : { ok: false, reason: `You can't ${doing}: it was not shared with you.` };
    case "not-author": {
      const isOwn = facts.authorId === actor.userId || facts.submitterId === actor.userId;
      if (!isOwn) return { ok: true };
      if (!facts.otherActiveLead) return { ok: true, selfReleased: true };
      return {
        ok: false,
        reason: `You can't ${doing}: you made it or asked for the decision, so another lead decides.`,
      };
    }
  }
}

/**
 * Whether the actor may do the action, with the reason when not. Pure: buttons and verbs ask the same question.
 * A person with several roles gets the union of what the roles allow; the author check is by person, not by role.
 * Workspace membership is decided before this (a stranger gets "not found").
 * @param facts what is known of the thing; a missing `ownerId` means that the thing does not exist yet
 */
export function can(actor: Actor, action: Action, facts: Facts = {}): Verdict {
  const rule: Rule = RULES[action];
  const verdicts = actor.roles.flatMap((role) => {
    const cell = rule.cells[role];
    return cell === undefined ? [] : [judge(cell, actor, facts, rule.doing)];
  });
  const allowed = verdicts.find((verdict) => verdict.ok);
  if (allowed) return allowed;
  const refused = verdicts[0];
  if (refused) return refused;
  const asked = ROLES.filter((role) => rule.cells[role] !== undefined);
  return { ok: false, reason: `You can't ${rule.doing}: it takes the role ${listRoles(asked)}.` };
}

/** Whether the actor sees names only (members list of a reader). */
export function isMasked(actor: Actor, action: Action): boolean {
  const rule: Rule = RULES[action];
  return actor.roles.every((role) => rule.cells[role] === undefined || rule.cells[role] === "masked");
}
