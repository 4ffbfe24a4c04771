import { moveRevision, setStandingRevision } from "@/db/queries/decisions";
import type { RevisionRow } from "@/db/queries/revisions";
import { ConflictError, InvalidInputError } from "@/lib/errors";
import type { GateResult } from "@/lib/gates/plan";
import { refreshAgainstStanding } from "@/lib/services/change-sets/refresh";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { requireApproval } from "@/lib/services/decisions/approval";
import { decide } from "@/lib/services/decisions/decide";
import { evidenceOf } from "@/lib/services/decisions/freeze-evidence";
import { type RecordedDecision, recordDecision } from "@/lib/services/decisions/record";
import { LOOK_AGAIN, requireSameComparison } from "@/lib/services/decisions/same-evidence";
import { namesRevision, type PromoteInput, promoteInput } from "@/lib/services/decisions/schema";
import { requireWholeImage } from "@/lib/services/decisions/whole-image";
import { openMusts } from "@/lib/services/gates/open-musts";
import type { GateDesk } from "@/lib/services/gates/status";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";

type Waiver = { gateId: string; reason: string };

/** Plan and comparison must still say what the lead saw, and the result belong to what counts now. @throws ConflictError */
function requireSameEvidence(gates: GateDesk, seen: ReturnType<typeof promoteInput.parse>): void {
  if (gates.planVersion !== seen.gatePlanVersion)
    throw new ConflictError("plan_moved", `The gate plan has another version than you saw. ${LOOK_AGAIN}`);
  const { comparison } = gates;
  if (comparison && comparison.state !== "ready") {
    const moved = comparison.moved.join(" ");
    throw new ConflictError(
      "evidence_moved",
      `The comparison does not show what counts now. ${moved || "Its result is not there yet."} Recompute it first. ${LOOK_AGAIN}`,
      { moved: comparison.moved },
    );
  }
  requireSameComparison(gates, seen);
}

/**
 * Every must gate is met, does not apply or is waived; only what is not met can be waived.
 * @returns the gates as the record prints them, and the waivers with the state they set aside
 * @throws InvalidInputError naming the gates
 */
function applyWaivers(results: readonly GateResult[], waivers: readonly Waiver[]) {
  const open = openMusts(results);
  const unknown = waivers.filter((waiver) => !open.some((gate) => gate.id === waiver.gateId));
  if (unknown.length > 0)
    throw new InvalidInputError(
      "nothing_to_waive",
      `There is nothing to waive at ${unknown.map((waiver) => waiver.gateId).join(", ")}: only a must gate that is not met can be waived.`,
    );
  const missing = open.filter((gate) => !waivers.some((waiver) => waiver.gateId === gate.id));
  if (missing.length > 0)
    throw new InvalidInputError(
      "gates_open",
      `Not met and not waived: ${missing.map((gate) => gate.title).join("; ")}. Get the evidence, or waive each with a reason.`,
      { gates: missing.map((gate) => gate.id) },
    );
  const gates = results.map((gate) =>
    waivers.some((waiver) => waiver.gateId === gate.id) ? { ...gate, state: "waived" as const } : gate,
  );
  const signed = waivers.map((waiver) => ({
    ...waiver,
    gateState: results.find((gate) => gate.id === waiver.gateId)?.state ?? "not_met",
  }));
  return { gates, signed };
}

/**
 * in review → promoted: the revision stands from now on, the one before is superseded.
 * @throws ForbiddenError author, submitter, role or passphrase; InvalidInputError typed number, open gates or a missing approval;
 * ConflictError when anything the lead saw has moved, or another decision was first
 */
export async function promoteRevision(ctx: Ctx, raw: PromoteInput): Promise<RecordedDecision> {
  const input = promoteInput.parse(raw);
  // In another state it is refused below, in the words that fit.
  const look = async (revision: RevisionRow) => {
    if (revision.state === "in_review") await requireWholeImage(ctx, revision);
  };
  return await decide(ctx, { action: "decision.promote", seen: input, look }, async (signing) => {
    const { tx, actor, desk, gates, reauthMethod, selfReleased } = signing;
    const { revision, standing, programme } = desk;
    const { workspaceId } = actor;
    refuseArchived(programme);
    if (revision.barredAt !== null)
      throw new ConflictError("barred", `R${revision.number} is barred: ${revision.barredReason}`);
    if (!namesRevision(input.typedNumber, revision.number))
      throw new InvalidInputError(
        "wrong_number",
        `You typed "${input.typedNumber}", but this page is about R${revision.number}. Nothing was decided.`,
      );
    if (input.waivers.length > 0) {
      const { authorId, submitterId } = revision;
      authorise(actor, "gate.waive", { authorId, submitterId, otherActiveLead: desk.otherActiveLead });
    }
    requireSameEvidence(gates, input);
    const { gates: results, signed } = applyWaivers(gates.results, input.waivers);
    const released = await requireApproval(tx, { actor, revision, gates, approval: input.approval });
    const { calibration, ...evidence } = evidenceOf(gates);

    const recorded = await recordDecision(tx, actor, {
      kind: "promote",
      programmeId: programme.id,
      revisionId: revision.id,
      fromRevisionId: standing?.id ?? null,
      reason: input.reason,
      reauthMethod,
      selfReleased,
      evidence: {
        ...evidence,
        gates: results,
        ...(calibration && { calibration: { ...calibration, ...released } }),
      },
      waivers: signed,
    });
    const moves = [
      standing === null ||
        (await moveRevision(tx, {
          workspaceId,
          revisionId: standing.id,
          rowVersion: standing.rowVersion,
          from: "promoted",
          set: { state: "superseded", stoodUntil: recorded.decidedAt },
        })),
      await moveRevision(tx, {
        workspaceId,
        revisionId: revision.id,
        rowVersion: input.rowVersion,
        from: "in_review",
        set: { state: "promoted", stoodFrom: recorded.decidedAt, stoodUntil: null },
      }),
      await setStandingRevision(tx, {
        workspaceId,
        programmeId: programme.id,
        from: standing?.id ?? null,
        to: revision.id,
      }),
    ];
    if (moves.includes(false))
      throw new ConflictError(
        "revision_moved",
        `R${revision.number} or the standing revision was changed at this moment. Nothing was decided. Open the page again.`,
      );
    await refreshAgainstStanding(tx, actor, { programmeId: programme.id });
    return recorded;
  });
}
