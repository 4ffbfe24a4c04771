import type { Queryable } from "@/db/client";
import { selectRoles } from "@/db/queries/people";
import type { RevisionRow } from "@/db/queries/revisions";
import { type SecondAgreementRow, selectSecondAgreements } from "@/db/queries/second-agreements";
import type { EvidenceCalibration } from "@/db/schema/decisions";
import { ConflictError, InvalidInputError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import type { CalibrationDesk } from "@/lib/services/gates/calibration";
import type { GateDesk } from "@/lib/services/gates/status";

type Approved = Pick<EvidenceCalibration, "approval" | "secondLead">;
type Concerned = Pick<RevisionRow, "id" | "authorId" | "submitterId">;

/** Whether promoting takes a named document or a second lead: the revision is meant for the road, and something marked is or may be touched. */
export function needsApproval(calibration: CalibrationDesk | null): boolean {
  if (calibration?.evidence.intendedUse !== "road") return false;
  return calibration.touched.length > 0 || calibration.untold;
}

/**
 * The agreements that count for a promotion by a person: given to exactly this change set by somebody who neither made the
 * revision, nor asked for the decision, nor promotes, and who still is a lead.
 */
export async function countingAgreements(
  db: Queryable,
  args: { workspaceId: string; revision: Concerned; touchedSha256: string | null; promoterId: string },
): Promise<SecondAgreementRow[]> {
  const { workspaceId, revision, touchedSha256, promoterId } = args;
  if (touchedSha256 === null) return [];
  const concerned = new Set([revision.authorId, revision.submitterId, promoterId]);
  const given = await selectSecondAgreements(db, {
    workspaceId,
    revisionId: revision.id,
    seenSha256: touchedSha256,
  });
  const counting: SecondAgreementRow[] = [];
  for (const agreement of given) {
    if (concerned.has(agreement.leadId)) continue;
    const roles = await selectRoles(db, { workspaceId, userId: agreement.leadId });
    if (roles?.includes("lead")) counting.push(agreement);
  }
  return counting;
}

/**
 * By whose word marked functions are released for the road.
 * @returns what the record prints; both null where none is needed and none was given
 * @throws ConflictError `changes_unknown` while nobody can tell whether something marked is touched; InvalidInputError `approval_missing`
 */
export async function requireApproval(
  db: Queryable,
  args: {
    actor: Ctx;
    revision: Concerned & Pick<RevisionRow, "number">;
    gates: GateDesk;
    approval: Approved["approval"];
  },
): Promise<Approved> {
  const { actor, revision, gates, approval } = args;
  const { calibration } = gates;
  const { marks, intendedUse } = calibration?.evidence ?? { marks: [], intendedUse: null };
  if (calibration && !calibration.changeSet && marks.length > 0 && intendedUse === "road")
    throw new ConflictError(
      "changes_unknown",
      `What R${revision.number} changes is not worked out yet, and functions of this programme are marked as emission- or safety-relevant. Open the revision's page, wait for its changes, then decide.`,
    );
  if (!needsApproval(calibration)) return { approval, secondLead: null };
  const [agreement] = await countingAgreements(db, {
    workspaceId: actor.workspaceId,
    revision,
    touchedSha256: calibration?.touchedSha256 ?? null,
    promoterId: actor.userId,
  });
  if (!agreement && approval === null)
    throw new InvalidInputError(
      "approval_missing",
      `R${revision.number} is meant for the road and changes ${calibration?.touched.length ? "what" : "bytes without a description, which may belong to what"} is marked as emission- or safety-relevant. Name the approval document and who issued it, or have a second lead agree.`,
    );
  const secondLead = agreement
    ? {
        id: agreement.leadId,
        name: agreement.leadName,
        at: agreement.createdAt.toISOString(),
        reason: agreement.reason,
      }
    : null;
  return { approval, secondLead };
}
