import { selectPeopleToTell } from "@/db/queries/decisions";
import { countOthersWithRole, hasPassphrase, selectUser } from "@/db/queries/people";
import { type RevisionRow, type RevisionState, selectRevision } from "@/db/queries/revisions";
import { selectSecondAgreements } from "@/db/queries/second-agreements";
import { NotFoundError } from "@/lib/errors";
import type { Verdict } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";
import { getComparison } from "@/lib/services/comparisons/load";
import type { ComparisonView } from "@/lib/services/comparisons/schema";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { countingAgreements, needsApproval } from "@/lib/services/decisions/approval";
import type { CalibrationDesk } from "@/lib/services/gates/calibration";
import { type GateStatus, gateDesk } from "@/lib/services/gates/status";
import { loadProgramme } from "@/lib/services/programmes/load";

/** What the decision page shows of marked functions that the revision changes. */
export interface DeskCalibration {
  seenSha256: string | null;
  /** Marked functions and characteristics that are touched, with what of them changed. */
  touched: { name: string; relevance: "emission" | "safety"; note: string; characteristics: string[] }[];
  /** Something is marked, and changed bytes that no description covers may belong to it. */
  untold: boolean;
  /** What a second lead agrees to; null where nothing marked is or may be touched. */
  touchedSha256: string | null;
  /** Promoting takes a named document or a second lead. */
  needsApproval: boolean;
  /** Agreements that would count if this person promoted. */
  agreements: { leadName: string; at: Date; reason: string }[];
  /** Why this person can't agree as second lead; null when they can. */
  agreeBlocked: string | null;
}

/** Everything the decision page shows beside the form. */
export interface DecisionDesk {
  programme: { id: string; name: string; archived: boolean };
  revision: {
    id: string;
    number: number;
    title: string;
    state: RevisionState;
    rowVersion: number;
    changeReason: string;
    intendedUse: string | null;
    touchesEmissionOrSafety: boolean | null;
    imageSha256: string;
    barredReason: string | null;
    setAside: boolean;
    submittedAt: Date | null;
  };
  standing: { id: string; number: number; title: string } | null;
  authorName: string;
  submitterName: string | null;
  gates: GateStatus;
  /** The comparison that the gates rest on; null when nobody has opened it. */
  comparison: ComparisonView | null;
  calibration: DeskCalibration;
  mayPromote: Verdict;
  mayTurnDown: Verdict;
  mayWaive: Verdict;
  hasPassphrase: boolean;
  /** How many people a decision is told. */
  peopleTold: number;
}

function agreeBlocked(ctx: Ctx, row: RevisionRow, agreed: boolean): string | null {
  if (row.authorId === ctx.userId || row.submitterId === ctx.userId)
    return "You made it or asked for the decision, so another lead agrees.";
  const verdict = can(ctx, "decision.agree");
  if (!verdict.ok) return verdict.reason;
  return agreed ? "You have agreed to exactly this. Another lead promotes." : null;
}

async function deskCalibration(
  ctx: Ctx,
  revision: RevisionRow,
  desk: CalibrationDesk | null,
): Promise<DeskCalibration> {
  const { db, workspaceId, userId } = ctx;
  const touchedSha256 = desk?.touchedSha256 ?? null;
  const counting = await countingAgreements(db, { workspaceId, revision, touchedSha256, promoterId: userId });
  const given = touchedSha256
    ? await selectSecondAgreements(db, { workspaceId, revisionId: revision.id, seenSha256: touchedSha256 })
    : [];
  const touched = (desk?.touched ?? []).map(({ mark: { name, relevance, note }, characteristics }) => ({
    name,
    relevance,
    note,
    characteristics,
  }));
  return {
    seenSha256: desk?.seenSha256 ?? null,
    touched,
    untold: desk?.untold ?? false,
    touchedSha256,
    needsApproval: needsApproval(desk),
    agreements: counting.map(({ leadName, createdAt: at, reason }) => ({ leadName, at, reason })),
    agreeBlocked: agreeBlocked(
      ctx,
      revision,
      given.some(({ leadId }) => leadId === userId),
    ),
  };
}

/**
 * A revision with the evidence for a decision on it.
 * @throws NotFoundError for another workspace's; ForbiddenError for who may not see comparisons
 */
export async function getDecisionDesk(ctx: Ctx, revisionId: string): Promise<DecisionDesk> {
  const { db, workspaceId, userId } = ctx;
  authorise(ctx, "comparison.view", { granted: false });
  const row = await selectRevision(db, { workspaceId, revisionId });
  if (!row) throw new NotFoundError("no_revision", "There is no such revision.");
  const { programme } = await loadProgramme(ctx, row.programmeId);
  const standingId = programme.standingRevisionId;
  const standing = standingId ? await selectRevision(db, { workspaceId, revisionId: standingId }) : null;
  const author = await selectUser(db, { userId: row.authorId });
  const submitter = row.submitterId ? await selectUser(db, { userId: row.submitterId }) : null;
  const gates = await gateDesk(db, { workspaceId, revision: row, standingRevisionId: standingId });
  const { stale, results, planVersion } = gates;
  const comparisonId = gates.comparison?.comparison.id ?? null;
  const otherLeads = await countOthersWithRole(db, { workspaceId, userId, role: "lead" });
  const facts = {
    authorId: row.authorId,
    submitterId: row.submitterId,
    otherActiveLead: otherLeads > 0,
  };
  const told = await selectPeopleToTell(db, row);
  return {
    programme: { id: programme.id, name: programme.name, archived: programme.archivedAt !== null },
    revision: {
      id: row.id,
      number: row.number,
      title: row.title,
      state: row.state,
      rowVersion: row.rowVersion,
      changeReason: row.changeReason,
      intendedUse: row.intendedUse,
      touchesEmissionOrSafety: row.touchesEmissionOrSafety,
      imageSha256: row.imageSha256,
      barredReason: row.barredAt ? (row.barredReason ?? "no reason was kept") : null,
      setAside: row.setAsideAt !== null,
      submittedAt: row.submittedAt,
    },
    standing: standing && { id: standing.id, number: standing.number, title: standing.title },
    authorName: author?.name ?? "somebody",
    submitterName: row.submitterId ? (submitter?.name ?? "somebody") : null,
    gates: { comparisonId, stale, results, planVersion },
    comparison: comparisonId ? await getComparison(ctx, comparisonId) : null,
    calibration: await deskCalibration(ctx, row, gates.calibration),
    mayPromote: can(ctx, "decision.promote", facts),
    mayTurnDown: can(ctx, "decision.turn_down", facts),
    mayWaive: can(ctx, "gate.waive", facts),
    hasPassphrase: await hasPassphrase(db, { userId }),
    peopleTold: told.length,
  };
}
