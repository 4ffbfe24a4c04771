import type { Actor, Verdict } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";

/**
 * Whether the actor may bring a run back: a lead, and not the one who set it aside where another active tester or lead
 * exists (row N05 of authorisation.csv).
 */
export function canBringBack(
  actor: Actor,
  facts: { setAsideBy: string | null; otherActive: boolean },
): Verdict {
  const verdict = can(actor, "run.bring_back");
  if (!verdict.ok || facts.setAsideBy !== actor.userId || !facts.otherActive) return verdict;
  return {
    ok: false,
    reason: "You set this run aside yourself, so another lead has to bring it back.",
  };
}
