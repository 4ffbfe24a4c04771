import type { Actor } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";

interface InFlight {
  state: string;
  authorId: string;
  submitterId: string | null;
  runs: number;
}

/** The next step of a revision in flight that waits for this very person, or null. */
export type NextStep = "decide" | "start validating" | "ask for a decision" | "drive its runs";

/**
 * What of a revision waits for the actor, by the same policy that offers the button.
 * @param facts whether another active lead exists, as in the policy
 */
export function nextStepFor(
  actor: Actor,
  revision: InFlight,
  facts: { otherActiveLead: boolean },
): NextStep | null {
  const { authorId, submitterId } = revision;
  const isOwn = authorId === actor.userId;
  switch (revision.state) {
    case "in_review":
      return can(actor, "decision.promote", { authorId, submitterId, ...facts }).ok ? "decide" : null;
    case "draft":
      return isOwn && can(actor, "revision.validate", { ownerId: authorId }).ok ? "start validating" : null;
    case "validating":
      if (revision.runs === 0) return can(actor, "run.attach").ok ? "drive its runs" : null;
      return isOwn && can(actor, "revision.ask", { ownerId: authorId }).ok ? "ask for a decision" : null;
    default:
      return null;
  }
}
