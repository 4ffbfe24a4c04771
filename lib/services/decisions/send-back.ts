import { moveRevision } from "@/db/queries/decisions";
import { ConflictError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { decide } from "@/lib/services/decisions/decide";
import { evidenceOf } from "@/lib/services/decisions/freeze-evidence";
import { type RecordedDecision, recordDecision } from "@/lib/services/decisions/record";
import { requireSameComparison } from "@/lib/services/decisions/same-evidence";
import {
  type HoldInput,
  holdInput,
  type TurnDownInput,
  turnDownInput,
} from "@/lib/services/decisions/schema";

type Next = Parameters<typeof moveRevision>[1]["set"];

async function sendBack(
  ctx: Ctx,
  input: ReturnType<typeof holdInput.parse>,
  { kind, set }: { kind: "hold" | "turn_down"; set: Next },
): Promise<RecordedDecision> {
  return await decide(ctx, { action: "decision.turn_down", seen: input }, async (signing) => {
    const { tx, actor, desk, gates, reauthMethod, selfReleased } = signing;
    const { revision, standing, programme } = desk;
    requireSameComparison(gates, input);
    const recorded = await recordDecision(tx, actor, {
      kind,
      programmeId: programme.id,
      revisionId: revision.id,
      fromRevisionId: standing?.id ?? null,
      reason: input.reason,
      reauthMethod,
      selfReleased,
      evidence: evidenceOf(gates),
    });
    const moved = await moveRevision(tx, {
      workspaceId: actor.workspaceId,
      revisionId: revision.id,
      rowVersion: input.rowVersion,
      from: "in_review",
      set,
    });
    if (!moved)
      throw new ConflictError(
        "revision_moved",
        `R${revision.number} was changed at this moment. Nothing was decided. Open the page again.`,
      );
    return recorded;
  });
}

/**
 * in review → validating: a decision needs more runs. Who asks again is its submitter then, under the plan in force then.
 * @throws as promoteRevision, but no gate is asked and a stale comparison will do
 */
export async function holdRevision(ctx: Ctx, raw: HoldInput): Promise<RecordedDecision> {
  return await sendBack(ctx, holdInput.parse(raw), {
    kind: "hold",
    set: { state: "validating", submitterId: null, submittedAt: null, gatePlanVersion: null },
  });
}

/** in review → turned down, for good: a better image is a new revision. @throws as holdRevision */
export async function turnDownRevision(ctx: Ctx, raw: TurnDownInput): Promise<RecordedDecision> {
  return await sendBack(ctx, turnDownInput.parse(raw), { kind: "turn_down", set: { state: "turned_down" } });
}
