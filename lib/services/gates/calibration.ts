import type { Queryable } from "@/db/client";
import { selectSetting } from "@/db/queries/calibration-settings";
import { type ChangeSetRow, type SideRow, selectSides } from "@/db/queries/change-sets";
import type { RevisionRow } from "@/db/queries/revisions";
import { type TouchedMark, touchedMarks } from "@/lib/calibration/changes/relevance";
import { withoutChecksums } from "@/lib/calibration/changes/uncovered/without-checksums";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";
import { digestOf } from "@/lib/canonical-json";
import type { CalibrationEvidence } from "@/lib/gates/evidence";
import { type CoverageNow, coverageNow } from "@/lib/services/change-sets/coverage-now";
import { currentChangeSet } from "@/lib/services/change-sets/current-input";
import { imageIntegrity } from "@/lib/services/change-sets/image-integrity";

type Revision = Pick<
  RevisionRow,
  "id" | "programmeId" | "parentId" | "touchesEmissionOrSafety" | "intendedUse"
>;

/** What the gates see of a candidate's calibration, and what of it a decision is bound to. */
export interface CalibrationDesk {
  evidence: CalibrationEvidence;
  /** What stands → candidate, once it is computed. */
  changeSet: { id: string; inputSha256: string; resultSha256: string } | null;
  coverageSha256: string | null;
  /** Marked functions and characteristics that the change set touches. */
  touched: TouchedMark[];
  /** Something is marked, and changed bytes that no description covers may belong to it. */
  untold: boolean;
  /** Digest of all of the above: what a lead saw; null while nothing of it is known. */
  seenSha256: string | null;
  /** Digest of the change set and of what in it is or may be marked (then with all marks): what a second lead agrees to; null where nothing is. */
  touchedSha256: string | null;
}

async function pair(
  db: Queryable,
  { workspaceId, a, b }: { workspaceId: string; a: SideRow | undefined; b: SideRow },
): Promise<ChangeSetRow | null> {
  return a && a.id !== b.id ? await currentChangeSet(db, { workspaceId, a, b }) : null;
}

/** What is neither there nor impossible is on its way, as far as a gate is concerned: it has too little until then. */
function coverageStateOf(now: CoverageNow | null): CalibrationEvidence["coverageState"] {
  const state = now?.shown.state;
  return state === "ready" || state === "no_runs" ? state : "computing";
}

/** Whether changed bytes that no description covers may belong to something marked. */
function isUntold({ fromStanding, marks }: CalibrationEvidence): boolean {
  if (!fromStanding || fromStanding.identical || marks.length === 0) return false;
  return fromStanding.readBy === "none" || fromStanding.uncoveredBytes > 0;
}

/** A change set without the stored values of checksums that the programme has declared. */
function judgedChanges(row: ChangeSetRow | null, regions: readonly ChecksumRegion[]) {
  return row?.result ? withoutChecksums(row.result, regions) : null;
}

/**
 * Reads what is known of a candidate's calibration at this moment, against what stands. Asks no policy.
 * @returns null where nothing stands, or the candidate itself does
 */
export async function calibrationDesk(
  db: Queryable,
  args: { workspaceId: string; revision: Revision; standingRevisionId: string | null },
): Promise<CalibrationDesk | null> {
  const { workspaceId, revision, standingRevisionId } = args;
  const { programmeId, parentId, touchesEmissionOrSafety, intendedUse } = revision;
  if (standingRevisionId === null || standingRevisionId === revision.id) return null;
  const revisionIds = [revision.id, standingRevisionId, ...(parentId ? [parentId] : [])];
  const sides = await selectSides(db, { workspaceId, revisionIds });
  const b = sides.find(({ id }) => id === revision.id);
  if (!b) return null;
  const sideOf = (wanted: string | null) => sides.find(({ id }) => id === wanted);
  const standing = await pair(db, { workspaceId, a: sideOf(standingRevisionId), b });
  // Where there is no parent, what is asked against it is asked against what stands.
  const parent =
    parentId === null || parentId === standingRevisionId
      ? standing
      : await pair(db, { workspaceId, a: sideOf(parentId), b });
  const marks = await selectSetting(db, { workspaceId, programmeId, kind: "relevance_marks" });
  const regions = await selectSetting(db, { workspaceId, programmeId, kind: "checksum_regions" });
  const coverage = standing?.result ? await coverageNow(db, standing) : null;
  const coverageState = coverageStateOf(coverage);
  const counts = coverageState === "ready";
  const evidence: CalibrationEvidence = {
    fromStanding: judgedChanges(standing, regions.content),
    fromParent: judgedChanges(parent, regions.content),
    coverage: counts ? (coverage?.shown.result ?? null) : null,
    coverageState,
    integrity: await imageIntegrity(db, {
      workspaceId,
      revisionId: revision.id,
      regionsVersion: regions.version,
    }),
    marks: marks.content,
    declaresTouch: touchesEmissionOrSafety,
    intendedUse,
  };
  const touched = standing?.result ? touchedMarks(standing.result, marks.content) : [];
  const untold = isUntold(evidence);
  const changeSet =
    standing?.resultSha256 != null
      ? { id: standing.id, inputSha256: standing.inputSha256, resultSha256: standing.resultSha256 }
      : null;
  const coverageSha256 = counts ? (coverage?.resultSha256 ?? null) : null;
  const { integrity } = evidence;
  const parentSha256 = parent?.resultSha256 ?? null;
  const isKnown = changeSet !== null || parentSha256 !== null || integrity.regions !== null;
  return {
    evidence,
    changeSet,
    coverageSha256,
    touched,
    untold,
    seenSha256: isKnown
      ? digestOf({
          ...{ changeSet, parentSha256, coverageSha256, integrity, marks: marks.content },
          regionsVersion: regions.version,
        })
      : null,
    touchedSha256:
      changeSet && (touched.length > 0 || untold)
        ? digestOf({ changeSet, touched, ...(untold && { marks: marks.content }) })
        : null,
  };
}
