import type { Queryable } from "@/db/client";
import { selectComparisonsOf } from "@/db/queries/comparisons";
import { selectGatePlan } from "@/db/queries/gate-plans";
import { selectProgramme } from "@/db/queries/programmes";
import { type RevisionRow, selectRevision } from "@/db/queries/revisions";
import { selectVehicleSheet } from "@/db/queries/vehicle-sheets";
import { NotFoundError } from "@/lib/errors";
import { evaluateGates } from "@/lib/gates/evaluate-gates";
import type { GateResult } from "@/lib/gates/plan";
import { type ComparisonStanding, comparisonStanding } from "@/lib/services/comparisons/load";
import { STANDARD_SHA256 } from "@/lib/services/comparisons/standard-digest";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { type CalibrationDesk, calibrationDesk } from "@/lib/services/gates/calibration";
import { gateEvidence } from "@/lib/services/gates/evidence";

/** How a revision stands towards the gates of its plan. */
export interface GateStatus {
  /** The comparison with what stands, under the standard settings; null when nobody has opened it or nothing stands. */
  comparisonId: string | null;
  /** The results belong to earlier inputs. */
  stale: boolean;
  results: GateResult[];
  planVersion: number | null;
}

/** The same with the comparison that it rests on. */
export interface GateDesk extends Omit<GateStatus, "comparisonId"> {
  comparison: ComparisonStanding | null;
  /** Null where nothing stands, or where no gate is asked any more. */
  calibration: CalibrationDesk | null;
}

/** States in which gates are asked; a decision froze those of the others. */
const ASKED = new Set<RevisionRow["state"]>(["draft", "validating", "in_review"]);

/** Gates that rest on the images and not on the comparison. */
const OF_CALIBRATION = new Set<GateResult["kind"]>([
  "touched",
  "step_limit",
  "coverage",
  "integrity",
  "declaration",
]);

function asStale(gate: GateResult, moved: readonly string[]): GateResult {
  return {
    ...gate,
    state: "stale",
    why: `Belongs to earlier inputs. ${moved.join(" ")}`.trim(),
    next: "Recompute the comparison.",
  };
}

/** Only comparisons under the standard settings count, so that nobody picks the settings under which a gate is met. */
async function standardComparison(
  db: Queryable,
  args: { workspaceId: string; revisionAId: string; revisionBId: string },
): Promise<ComparisonStanding | null> {
  if (args.revisionAId === args.revisionBId) return null;
  const rows = await selectComparisonsOf(db, { ...args, nullTestRoadDayId: null });
  const row = rows.find((comparison) => comparison.settingsSha256 === STANDARD_SHA256);
  return row ? await comparisonStanding(db, row) : null;
}

/**
 * Evaluates the gates of a revision against what stands, as they are at this moment. Asks no policy; a decision calls it
 * inside its transaction. A revision in review keeps the plan version it was submitted under.
 */
export async function gateDesk(
  db: Queryable,
  args: {
    workspaceId: string;
    revision: Pick<
      RevisionRow,
      | "id"
      | "programmeId"
      | "parentId"
      | "gatePlanVersion"
      | "state"
      | "touchesEmissionOrSafety"
      | "intendedUse"
    >;
    standingRevisionId: string | null;
  },
): Promise<GateDesk> {
  const { workspaceId, revision, standingRevisionId } = args;
  const { programmeId } = revision;
  const version = revision.state === "in_review" ? (revision.gatePlanVersion ?? undefined) : undefined;
  const plan = await selectGatePlan(db, { workspaceId, programmeId, version });
  const planVersion = plan?.version ?? null;
  const comparison =
    standingRevisionId && ASKED.has(revision.state)
      ? await standardComparison(db, {
          workspaceId,
          revisionAId: standingRevisionId,
          revisionBId: revision.id,
        })
      : null;
  const calibration = ASKED.has(revision.state)
    ? await calibrationDesk(db, { workspaceId, revision, standingRevisionId })
    : null;
  if (!plan || !ASKED.has(revision.state))
    return { comparison, calibration, stale: false, results: [], planVersion };
  const stale = comparison?.state === "stale";
  const sheet = await selectVehicleSheet(db, { workspaceId, programmeId });
  const evidence = gateEvidence(comparison, sheet?.figures ?? null, calibration?.evidence ?? null);
  const results = evaluateGates(plan.plan, evidence);
  return {
    comparison,
    calibration,
    stale,
    planVersion,
    results: stale
      ? results.map((gate) => (OF_CALIBRATION.has(gate.kind) ? gate : asStale(gate, comparison.moved)))
      : results,
  };
}

/**
 * How a revision stands towards its gates.
 * @throws NotFoundError for another workspace's; ForbiddenError
 */
export async function gateStatus(ctx: Ctx, { revisionId }: { revisionId: string }): Promise<GateStatus> {
  authorise(ctx, "history.view");
  const { db, workspaceId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  const programme = revision
    ? await selectProgramme(db, { workspaceId, programmeId: revision.programmeId })
    : null;
  if (!revision || !programme) throw new NotFoundError("no_revision", "There is no such revision.");
  const { standingRevisionId } = programme;
  const {
    comparison,
    calibration: _,
    ...status
  } = await gateDesk(db, { workspaceId, revision, standingRevisionId });
  return { ...status, comparisonId: comparison?.comparison.id ?? null };
}
