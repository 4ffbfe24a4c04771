import type { DecisionDesk } from "@/lib/services/decisions/load-desk";
import { stateSentence } from "@/lib/services/decisions/state-sentence";

/** Why nobody can decide on the revision now, whatever their role; null when a decision is open. */
function closedBecause({ revision }: DecisionDesk): string | null {
  const name = `R${revision.number}`;
  if (revision.setAside) return `${name} is set aside.`;
  if (revision.state !== "in_review") return `${name} is not in review: ${stateSentence(revision.state)}.`;
  return null;
}

/** Why each step of the decision page can't be taken now, in the words that the server would use; null when it can. */
export function blockedSteps(desk: DecisionDesk): {
  promote: string | null;
  sendBack: string | null;
  waive: string | null;
} {
  const { revision, comparison, mayPromote, mayTurnDown, mayWaive, programme } = desk;
  const closed = closedBecause(desk);
  const promote =
    closed ??
    (mayPromote.ok ? null : mayPromote.reason) ??
    (revision.barredReason ? `R${revision.number} is barred: ${revision.barredReason}` : null) ??
    (programme.archived ? `${programme.name} is archived.` : null) ??
    (comparison && comparison.state !== "ready"
      ? "The comparison does not show what counts now: recompute it first."
      : null);
  return {
    promote,
    sendBack: closed ?? (mayTurnDown.ok ? null : mayTurnDown.reason),
    waive: mayWaive.ok ? null : mayWaive.reason,
  };
}
