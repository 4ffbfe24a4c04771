import { selectSetting } from "@/db/queries/calibration-settings";
import { selectChangeSetOf, selectComparableRevisions } from "@/db/queries/change-sets";
import { selectImageCheck, selectImageReading } from "@/db/queries/image-readings";
import { selectLookedAt } from "@/db/queries/looked-at";
import { type RevisionRow, selectRevision, selectStanding } from "@/db/queries/revisions";
import { withoutChecksums } from "@/lib/calibration/changes/uncovered/without-checksums";
import { axisQuantities, linksInUse, suggestedLinks } from "@/lib/calibration/coverage/suggest-links";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { isReaderOnly, RELEASED_STATES } from "@/lib/policy/released";
import { contradictionOf } from "@/lib/services/change-sets/contradiction";
import { coverageNow } from "@/lib/services/change-sets/coverage-now";
import { changeSetInputSha256 } from "@/lib/services/change-sets/current-input";
import { digestsOf } from "@/lib/services/change-sets/looked-at";
import { loadPair } from "@/lib/services/change-sets/pair";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";
import { shownDescription } from "@/lib/services/change-sets/shown-description";
import type { Ctx } from "@/lib/services/ctx";
import { noRevision } from "@/lib/services/revisions/load";

const UNDECIDED = new Set<RevisionRow["state"]>(["draft", "validating", "in_review"]);

/** What a revision is compared with when nobody chose: what stands while nothing is decided on it, else its parent. */
async function usualCounterpart(ctx: Ctx, revision: RevisionRow): Promise<string | null> {
  const { workspaceId, db } = ctx;
  const { programmeId, parentId } = revision;
  const standing = UNDECIDED.has(revision.state)
    ? await selectStanding(db, { workspaceId, programmeId })
    : null;
  const usual = standing && standing.id !== revision.id ? standing.id : parentId;
  if (usual === null || !isReaderOnly(ctx)) return usual;
  const row = await selectRevision(db, { workspaceId, revisionId: usual });
  return row && RELEASED_STATES.has(row.state) ? usual : null;
}

async function choicesOf(
  ctx: Ctx,
  { id, programmeId }: RevisionRow,
): Promise<RevisionChangesView["choices"]> {
  const { workspaceId, db } = ctx;
  const rows = await selectComparableRevisions(db, { workspaceId, programmeId });
  const readerOnly = isReaderOnly(ctx);
  return rows
    .filter((row) => row.id !== id && (!readerOnly || RELEASED_STATES.has(row.state)))
    .map(({ id, number, title }) => ({ id, number, title }));
}

/** What holds for a revision's own image, whatever it is compared with. */
async function imageFacts({ db, workspaceId }: Ctx, revision: RevisionRow) {
  const { id: revisionId, programmeId, descriptionId } = revision;
  const kind = "checksum_regions" as const;
  const { version: regionsVersion } = await selectSetting(db, { workspaceId, programmeId, kind });
  const check = await selectImageCheck(db, { workspaceId, revisionId, regionsVersion });
  const key = { workspaceId, revisionId, readerVersion: READER_VERSION };
  const reading = descriptionId === null ? null : await selectImageReading(db, { ...key, descriptionId });
  return {
    fingerprintHolds: check?.result.fingerprintHolds ?? null,
    integrity: check?.result.regions ?? null,
    epk: reading?.summary.epk ?? null,
  };
}

type Compared = Pick<
  RevisionChangesView,
  | "state"
  | "failure"
  | "changeSetId"
  | "changes"
  | "checksumBytes"
  | "coverage"
  | "lookedAt"
  | "contradiction"
  | "inputQuantities"
>;

const NOTHING: Compared = {
  state: "nothing_to_compare",
  failure: null,
  changeSetId: null,
  changes: null,
  checksumBytes: 0,
  coverage: { state: "not_asked", failure: null, result: null, moved: false },
  lookedAt: [],
  contradiction: null,
  inputQuantities: [],
};

async function compared(
  ctx: Ctx,
  args: { revision: RevisionRow; before: RevisionRow; marks: RevisionChangesView["marks"] },
): Promise<Compared> {
  const { db, workspaceId, userId } = ctx;
  const { revision, before, marks } = args;
  const row = await selectChangeSetOf(db, {
    workspaceId,
    revisionAId: before.id,
    revisionBId: revision.id,
    inputSha256: changeSetInputSha256(before, revision),
  });
  if (!row?.result)
    return {
      ...NOTHING,
      state: row?.state ?? "not_asked",
      failure: row?.failure ?? null,
      changeSetId: row?.id ?? null,
    };
  const { programmeId } = revision;
  const kind = "checksum_regions" as const;
  const { content: regions } = await selectSetting(db, { workspaceId, programmeId, kind });
  const changes = withoutChecksums(row.result, regions);
  const coverage = await coverageNow(db, row);
  const looked = await selectLookedAt(db, { workspaceId, userId, revisionId: revision.id });
  const known = digestsOf(changes);
  const links = linksInUse(changes, { chosen: coverage.input.links, columns: coverage.columns });
  return {
    state: "ready",
    failure: null,
    changeSetId: row.id,
    changes,
    checksumBytes: row.result.uncoveredBytes - changes.uncoveredBytes,
    coverage: coverage.shown,
    lookedAt: looked.filter((digest) => known.has(digest)),
    contradiction: contradictionOf(changes, marks, revision),
    inputQuantities: axisQuantities(changes).map((quantity) => ({
      ...quantity,
      link: links.find((link) => link.quantity === quantity.quantity) ?? null,
      suggestions: suggestedLinks(quantity, coverage.columns),
    })),
  };
}

/**
 * What a revision changes against another of its programme: against what stands while nothing is decided on it, else against its
 * parent, or against the one asked for.
 * @throws NotFoundError for another workspace's; ForbiddenError, for a reader unless the programme is shared and both are released
 */
export async function getRevisionChanges(
  ctx: Ctx,
  revisionId: string,
  againstId?: string,
): Promise<RevisionChangesView> {
  const { db, workspaceId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { programmeId } = revision;
  const asked = againstId ?? (await usualCounterpart(ctx, revision));
  const { before } = await loadPair(ctx, { revision, againstId: asked }, "revision.compare_images");
  const { content: marks } = await selectSetting(db, { workspaceId, programmeId, kind: "relevance_marks" });
  const standing = await selectStanding(db, { workspaceId, programmeId });
  return {
    revision: { id: revision.id, number: revision.number, title: revision.title, programmeId },
    against: before && {
      id: before.id,
      number: before.number,
      title: before.title,
      stands: before.id === standing?.id,
      isParent: before.id === revision.parentId,
    },
    choices: await choicesOf(ctx, revision),
    marks,
    descriptions: {
      before: before && (await shownDescription(db, before)),
      after: await shownDescription(db, revision),
    },
    ...(await imageFacts(ctx, revision)),
    ...(before && before.id !== revision.id ? await compared(ctx, { revision, before, marks }) : NOTHING),
  };
}
